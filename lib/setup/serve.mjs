import { ensureBuild } from './build.mjs'
import { migrate } from './database-steps.mjs'
import { endingIsSuccess } from './ending.mjs'
import { holdLock } from './lock.mjs'
import { ensurePackages } from './packages.mjs'
import { makeDataDir } from './paths.mjs'
import { serverPort } from './ports.mjs'
import { createProcesses, endLeftovers } from './processes.mjs'
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
  const processes = createProcesses()
  say(`starting the server on port ${environment.PORT} for ${environment.APP_ORIGIN}`)
  processes.start('server', 'server.ts', forServer)
  endingIsSuccess()
  await processes.untilOneEnds()
})
