import { systemActor } from '@/lib/auth/actor'
import { closeOrm } from '@/lib/db/orm'
import { verifySeals } from '@/lib/ingest/verify-seals'

// `npm run seals:verify`: looks through all sealed readings and ends with status 1 when a seal does not hold.

// The environment is checked whole; what only a web server needs may be absent here and is never used.
process.env['APP_ORIGIN'] ??= 'http://127.0.0.1'
process.env['SESSION_SECRET'] ??= 'not used here: this program only reads'

try {
  const { seals, firings, readings, bytes, bad } = await verifySeals(systemActor('seal verification'))
  const each = readings === 0 ? '' : `, ${(bytes / readings).toFixed(2)} bytes a reading`
  process.stdout.write(`${seals} seals of ${firings} firings hold ${readings} readings${each}.\n`)
  for (const one of bad) {
    process.stderr.write(
      `${one.serial}, firing ${one.firingId}, revision ${one.revision}, ${one.probeName}: ${one.reason}\n`,
    )
  }
  if (bad.length > 0) {
    process.stderr.write(`${bad.length} of them do not hold. Restore those firings from a backup.\n`)
    process.exitCode = 1
  } else process.stdout.write('Every seal holds.\n')
} finally {
  await closeOrm()
}
