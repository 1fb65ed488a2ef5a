import { rmSync } from 'node:fs'
import { DATABASE, FILES_DIR, SPOOL_DIR, withOwner } from './environment.mjs'
import { keep, readKept } from './kept.mjs'
import { typescript } from './processes.mjs'
import { dropDatabase, ensureDatabase } from './postgres.mjs'
import { run, tail } from './run.mjs'
import { say, SetupError } from './say.mjs'

/** As in `simulators/scenarios/seed.ts`; known here too, so that a wrong name is refused before anything is removed. */
export const SCENARIOS = ['demo', 'empty', 'busy']
const RECORD = 'scenario.json'

/** Brings the schema up to date. `environment` has `DATABASE_OWNER_URL`. */
export async function migrate(environment) {
  say('bringing the database schema up to date')
  const result = await run(process.execPath, typescript('lib/db/migrate.ts', 'up'), { env: environment })
  if (result.code !== 0) {
    throw new SetupError(
      'The database schema could not be brought up to date.',
      tail(result.stderr || result.stdout),
    )
  }
}

/**
 * Makes the clone's database, migrates it and loads its scenario: the one it was seeded with last (`demo` at first).
 * A seed that broke off is begun again from an empty database.
 */
export async function prepareDatabase(cluster, environment) {
  const before = readKept(RECORD, { name: 'demo', finished: false })
  if (!before.finished) await dropDatabase(cluster, DATABASE)
  await loadScenario(cluster, environment, before.name)
}

/** The same for a scenario of one's choice, from an empty database. */
export async function recreateDatabase(cluster, environment, name) {
  keep(RECORD, { name, finished: false })
  await dropDatabase(cluster, DATABASE)
  await loadScenario(cluster, environment, name)
}

async function loadScenario(cluster, environment, name) {
  const owner = withOwner(environment, cluster)
  const isNew = await ensureDatabase(cluster, DATABASE)
  await migrate(owner)
  if (isNew) {
    // Readings that wait for a database that is gone belong to nobody, and so do its photos.
    for (const folder of [SPOOL_DIR, FILES_DIR]) rmSync(folder, { recursive: true, force: true })
    keep(RECORD, { name, finished: false })
    say(`loading the scenario “${name}” (once; up to two minutes)`)
  }
  const result = await run(process.execPath, typescript('simulators/scenarios/seed.ts', name), {
    env: owner,
    show: true,
  })
  if (result.code !== 0) {
    throw new SetupError(
      `The scenario “${name}” could not be loaded.`,
      'Read the message above; the next run begins it anew.',
    )
  }
  keep(RECORD, { name, finished: true })
}
