import { runOnDatabase } from './database-program.mjs'
import { main } from './say.mjs'

/** Computes the checksum of every seal again and decodes it. Ends with status 1 when a seal does not hold. */
await main(() => runOnDatabase('lib/ingest/verify-seals-command.ts'))
