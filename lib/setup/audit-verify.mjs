import { DATABASE, localEnvironment } from './environment.mjs'
import { ensurePackages } from './packages.mjs'
import { wantedPort } from './ports.mjs'
import { hasDatabase, withCluster } from './postgres.mjs'
import { typescript } from './processes.mjs'
import { run } from './run.mjs'
import { main, SetupError } from './say.mjs'

/**
 * Checks the audit trail's chain of hashes: of the database that `DATABASE_URL` names, else of this clone's own.
 * Ends with status 1 when an entry does not fit.
 */
await main(async () => {
  await ensurePackages()
  if (process.env.DATABASE_URL) return verify(process.env)
  return withCluster('main', {}, async (cluster) => {
    if (!(await hasDatabase(cluster, DATABASE))) {
      throw new SetupError(
        'This clone has no database yet.',
        'Run npm start first, or name a database in DATABASE_URL.',
      )
    }
    return verify(await localEnvironment({ cluster, port: wantedPort(), mode: 'demo' }))
  })
})

async function verify(env) {
  const program = typescript('lib/audit/verify-command.ts', ...process.argv.slice(2))
  return (await run(process.execPath, program, { env, show: true })).code
}
