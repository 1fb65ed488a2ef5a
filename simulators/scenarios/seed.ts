import { closeOrm } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { isSiteThere } from '@/lib/site/create-site'
import { busyShape, demoShape, seedDemo } from '@/simulators/scenarios/demo'
import { seedEmpty } from '@/simulators/scenarios/empty'
import { startOwnFiles } from '@/simulators/scenarios/own-files'

/** Loads one scenario into an empty, migrated database; does nothing when a site is there already. */
const scenarios: Record<string, (say: (line: string) => void) => Promise<void>> = {
  demo: (say) => seedDemo(demoShape, say),
  busy: (say) => seedDemo(busyShape, say),
  empty: seedEmpty,
}

// The people of a scenario are invented: nothing is mailed to them, and invitations are taken up by their links.
process.env['SMTP_URL'] = ''
process.env['LOG_LEVEL'] = 'fatal'
// Photos of the demo go where the files simulator will find them; it runs in here while the seed does.
const files = await startOwnFiles()

const say = (line: string) => process.stdout.write(`  ${line}\n`)
const name = process.argv[2] ?? 'demo'
const scenario = scenarios[name]
if (scenario === undefined) {
  process.stderr.write(
    `There is no scenario "${name}". Choose one of ${Object.keys(scenarios).join(', ')}.\n`,
  )
  process.exit(1)
}

try {
  if (await isSiteThere()) say('The database has its site already; nothing was seeded.')
  else {
    const startedMs = Date.now()
    await scenario(say)
    say(`seeded "${name}" in ${Math.round((Date.now() - startedMs) / 1000)} s`)
  }
} finally {
  await closeIngestPool()
  await closeOrm()
  files.closeAllConnections()
  files.close()
}
