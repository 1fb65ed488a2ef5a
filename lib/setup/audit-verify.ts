import { systemActor } from '@/lib/auth/actor'
import type { Anchor } from '@/lib/audit/verify-chain'
import { verifyChain } from '@/lib/audit/verify-chain'
import { closeOrm } from '@/lib/db/orm'

/**
 * `npm run audit:verify [-- --noted 1234:9f86d0…]`: hashes the whole audit trail again. Ends with 0 when it holds,
 * 1 when it does not. `--noted` gives an entry's number and hash that were written down at an earlier run.
 */
function readAnchor(argv: readonly string[]): Anchor | null {
  const at = argv.indexOf('--noted')
  if (at === -1) return null
  const match = /^(\d+):([0-9a-f]{64})$/.exec(argv[at + 1] ?? '')
  if (match === null) throw new Error('Write --noted NUMBER:HASH, as an earlier run printed it.')
  return { seq: Number(match[1]), hash: match[2] ?? '' }
}

/** The environment is checked whole; what only a web server needs may be absent here and is never used. */
function fillUnused(): void {
  process.env['APP_ORIGIN'] ??= 'http://127.0.0.1'
  process.env['SESSION_SECRET'] ??= 'not used by this program: it reads only'
}

async function main(): Promise<boolean> {
  fillUnused()
  const anchor = readAnchor(process.argv.slice(2))
  const chain = await verifyChain(systemActor('audit verification'), anchor)
  if (chain.isIntact) {
    console.log(`The audit trail holds: ${chain.entries} entries.`)
    console.log(`Note this to compare with later: --noted ${chain.entries}:${chain.lastHash}`)
  } else {
    console.log(
      `The audit trail is broken at entry ${chain.firstBrokenSeq}: it was changed, removed or put in. The ${chain.entries} before it hold.`,
    )
  }
  return chain.isIntact
}

try {
  process.exitCode = (await main()) ? 0 : 1
} catch (error) {
  console.error(error instanceof Error ? error.message : error)
  process.exitCode = 2
} finally {
  await closeOrm()
}
