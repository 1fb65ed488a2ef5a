import { DATABASE, localEnvironment } from './environment.mjs'
import { ensurePackages } from './packages.mjs'
import { wantedPort } from './ports.mjs'
import { hasDatabase, withCluster } from './postgres.mjs'
import { typescript } from './processes.mjs'
import { run } from './run.mjs'
import { SetupError } from './say.mjs'

/**
 * Runs a program that only reads: on the database that `DATABASE_URL` names, else on this clone's own.
 *
 * @param {string} file
 * @param {string[]} args
 * @returns {Promise<number>} its exit status
 */
export async function runOnDatabase(file, ...args) {
  await ensurePackages()
  const program = typescript(file, ...args)
  const start = async (env) => (await run(process.execPath, program, { env, show: true })).code
  if (process.env.DATABASE_URL) return start(process.env)
  return withCluster('main', {}, async (cluster) => {
    if (!(await hasDatabase(cluster, DATABASE))) {
      throw new SetupError(
        'This clone has no database yet.',
        'Run npm start first, or name a database in DATABASE_URL.',
      )
    }
    return start(await localEnvironment({ cluster, port: wantedPort(), mode: 'demo' }))
  })
}
