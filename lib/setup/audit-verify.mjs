import { localEnvironment } from './environment.mjs'
import { ensurePackages } from './packages.mjs'
import { wantedPort } from './ports.mjs'
import { withCluster } from './postgres.mjs'
import { typescript } from './processes.mjs'
import { run } from './run.mjs'
import { main } from './say.mjs'

/**
 * Checks the audit trail's chain of hashes: of the database that `DATABASE_URL` names, else of this clone's own.
 * Ends with status 1 when an entry does not fit.
 */
await main(async () => {
  await ensurePackages()
  if (process.env.DATABASE_URL) return verify(process.env)
  return withCluster('main', {}, async (cluster) =>
    verify(await localEnvironment({ cluster, port: wantedPort(), mode: 'demo' })),
  )
})

async function verify(env) {
  return (await run(process.execPath, typescript('lib/audit/verify-command.ts'), { env, show: true })).code
}
