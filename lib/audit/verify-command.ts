import { systemActor } from '@/lib/auth/actor'
import { verifyChain } from '@/lib/audit/verify-chain'
import type { Anchor } from '@/lib/audit/verify-chain'
import { closeOrm } from '@/lib/db/orm'

// `npm run audit:verify [-- SEQ:HASH]`: walks the audit trail and ends with status 1 when an entry does not hold.
// The anchor is what an earlier run printed; only with it can a trail be found out that was cut short or made anew.

function readAnchor(text: string | undefined): Anchor | null {
  if (text === undefined) return null
  const match = /^(\d+):([0-9a-f]{64})$/.exec(text)
  if (match === null) {
    process.stderr.write(`“${text}” is no anchor. Give the line that an earlier run printed: SEQ:HASH\n`)
    process.exit(2)
  }
  return { seq: Number(match[1]), hash: match[2] ?? '' }
}

// The environment is checked whole; what only a web server needs may be absent here and is never used.
process.env['APP_ORIGIN'] ??= 'http://127.0.0.1'
process.env['SESSION_SECRET'] ??= 'not used here: this program only reads'

try {
  const chain = await verifyChain(systemActor('audit verification'), readAnchor(process.argv[2]))
  if (chain.isIntact) {
    process.stdout.write(`The audit trail holds: ${chain.entries} entries.\n`)
    if (chain.entries > 0) {
      process.stdout.write(
        `Keep this outside the database, and give it to the next run: ${chain.entries}:${chain.lastHash}\n`,
      )
    }
  } else {
    process.stderr.write(
      `The audit trail is broken at entry ${chain.firstBrokenSeq}; ${chain.entries} entries before it hold.\n`,
    )
    process.exitCode = 1
  }
} finally {
  await closeOrm()
}
