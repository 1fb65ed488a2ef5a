import { ensureBuild } from './build.mjs'
import { migrate } from './database-steps.mjs'
import { endingIsSuccess } from './ending.mjs'
import { holdLock } from './lock.mjs'
import { ensurePackages } from './packages.mjs'
import { makeDataDir } from './paths.mjs'
import { serverPort } from './ports.mjs'
import { createProcesses, endLeftovers, typescript } from './processes.mjs'
import { run } from './run.mjs'
import { main, say, SetupError } from './say.mjs'
import { serveEnvironment, serveTroubles } from './serve-environment.mjs'

const command = 'npm run serve'

/** Production: the server alone, on a database and with secrets that the environment gives. */
await main(async () => {
  const troubles = serveTroubles(process.env)
  if (troubles.length > 0) {
    throw new SetupError('Production cannot start: its environment is not complete.', troubles.join('\n'))
  }
  makeDataDir()
  await holdLock('app', command)
  await endLeftovers()
  await serverPort(command)
  await ensurePackages()
  const environment = serveEnvironment(process.env)
  await migrate(environment)
  await ensureBuild(command)
  const forServer = { ...environment }
  delete forServer.DATABASE_OWNER_URL
  await greetFirstAdministrator(forServer)
  const processes = createProcesses()
  say(`starting the server on port ${environment.PORT} for ${environment.APP_ORIGIN}`)
  processes.start('server', 'server.ts', forServer)
  endingIsSuccess()
  await processes.untilOneEnds()
})

/** While nobody has an account, prints the one-time link that makes the first administrator. */
async function greetFirstAdministrator(env) {
  const program = typescript('lib/setup/first-administrator.ts')
  const { code } = await run(process.execPath, program, { env, show: true })
  if (code !== 0) {
    throw new SetupError(
      'The database could not be asked for accounts.',
      'Look at DATABASE_URL and its role.',
    )
  }
}
