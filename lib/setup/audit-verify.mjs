import { runOnDatabase } from './database-program.mjs'
import { main } from './say.mjs'

/** Checks the audit trail's chain of hashes. Ends with status 1 when an entry does not fit. */
await main(() => runOnDatabase('lib/audit/verify-command.ts', ...process.argv.slice(2)))
