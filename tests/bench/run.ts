import { execFileSync } from 'node:child_process'
import { closeOrm } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import type { Figure } from '@/tests/bench/figure'
import { printFigures } from '@/tests/bench/figure'
import { benchAlarmRate } from '@/tests/bench/alarm-rate'
import { benchFanOut } from '@/tests/bench/fan-out'
import { benchIngest } from '@/tests/bench/ingest'
import { benchLiveStep } from '@/tests/bench/live-step'
import { benchOpenFiring } from '@/tests/bench/open-firing'
import { benchScience } from '@/tests/bench/science'
import { benchScore } from '@/tests/bench/score'
import { createTestDatabase } from '@/tests/support/database'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'

type Bench = (people: TestPeople) => Promise<Figure[]>

/**
 * Those that need a database, in the order in which they run, after `science`, which needs none. `npm run bench -- NAME`
 * runs those whose name contains NAME.
 */
const benches: Record<string, Bench> = {
  ingest: () => benchIngest(),
  'live step': benchLiveStep,
  'alarm rate': () => benchAlarmRate(),
  'fan-out': benchFanOut,
  'open firing': benchOpenFiring,
  score: benchScore,
}

async function runWithDatabase(): Promise<void> {
  const database = await createTestDatabase()
  try {
    const people = await createPeople(database)
    for (const [name, bench] of chosen) {
      process.stdout.write(`${name} …\n`)
      figures.push(...(await bench(people)))
    }
  } finally {
    await closeIngestPool()
    await closeOrm()
    await database.drop()
  }
}

const [wanted = ''] = process.argv.slice(2)
const chosen = Object.entries(benches).filter(([name]) => name.includes(wanted))
const figures: Figure[] = []
if ('science'.includes(wanted)) {
  process.stdout.write('science …\n')
  figures.push(...benchScience())
}
if (chosen.length > 0) await runWithDatabase()
process.stdout.write(`\n${printFigures(figures)}\n`)
// Last, and in processes of their own: each points its process at the database of the app that it starts.
for (const [name, file] of [
  ['page weight', 'page-weight'],
  ['live page', 'live-page'],
]) {
  if (name?.includes(wanted) !== true) continue
  execFileSync(process.execPath, ['--import', 'tsx', `tests/bench/${file}.ts`], { stdio: 'inherit' })
}
