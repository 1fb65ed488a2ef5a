import { recreateDatabase, SCENARIOS } from './database-steps.mjs'
import { localEnvironment } from './environment.mjs'
import { holdLock } from './lock.mjs'
import { ensurePackages } from './packages.mjs'
import { wantedPort } from './ports.mjs'
import { withCluster } from './postgres.mjs'
import { endLeftovers } from './processes.mjs'
import { main, say, SetupError } from './say.mjs'

await main(async () => {
  const name = process.argv[2] ?? 'demo'
  if (!SCENARIOS.includes(name)) {
    throw new SetupError(
      `There is no scenario “${name}”.`,
      `Choose one: npm run seed -- ${SCENARIOS.join(' | ')}`,
    )
  }
  await holdLock('app', 'npm run seed')
  await endLeftovers()
  await ensurePackages()
  await withCluster('main', { own: true }, async (cluster) => {
    say(`emptying this clone's database, to load the scenario “${name}” into it`)
    await recreateDatabase(
      cluster,
      await localEnvironment({ cluster, port: wantedPort(), mode: 'demo' }),
      name,
    )
  })
  say(`the scenario “${name}” is loaded; npm start shows it`)
})
