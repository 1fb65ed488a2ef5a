import { readFileSync } from 'node:fs'
import { setTimeout as sleep } from 'node:timers/promises'
import { ensureBuild } from './build.mjs'
import { prepareDatabase } from './database-steps.mjs'
import { endingIsSuccess, isEnding } from './ending.mjs'
import { DEMO_FILE, FILES, localEnvironment, MAIL_PAGE, MAIL_SMTP } from './environment.mjs'
import { holdLock } from './lock.mjs'
import { ensurePackages } from './packages.mjs'
import { keptPort, serverPort } from './ports.mjs'
import { withCluster } from './postgres.mjs'
import { createProcesses, endLeftovers } from './processes.mjs'
import { main, say, SetupError } from './say.mjs'

const isDev = process.argv.includes('--dev')
const command = isDev ? 'npm run dev' : 'npm start'

await main(async () => {
  await holdLock('app', command)
  await endLeftovers()
  const port = await serverPort(command)
  await ensurePackages()
  await withCluster('main', { own: true }, async (cluster) => {
    for (const purpose of [MAIL_SMTP, MAIL_PAGE, FILES]) await keptPort(purpose)
    const environment = await localEnvironment({ cluster, port, mode: isDev ? 'dev' : 'demo' })
    if (!isDev) await ensureBuild(command)
    await prepareDatabase(cluster, environment)
    const processes = createProcesses()
    try {
      await startAll(processes, environment)
      endingIsSuccess()
      printAddress(environment)
      await processes.untilOneEnds()
    } finally {
      if (!isEnding()) await processes.stopAll()
    }
  })
})

async function startAll(processes, environment) {
  say(`starting the server on port ${environment.PORT}`)
  processes.start('mail', 'simulators/mail/main.ts', environment)
  processes.start('files', 'simulators/files/main.ts', environment)
  processes.start('server', 'server.ts', environment)
  await untilReady(processes, environment.SERVER_URL)
  processes.start('hearth', 'simulators/hearth/main.ts', environment)
}

async function untilReady(processes, url) {
  for (const until = Date.now() + 180_000; Date.now() < until;) {
    processes.throwIfOneEnded()
    const answer = await fetch(`${url}/api/health/ready`, { signal: AbortSignal.timeout(30_000) }).catch(
      () => null,
    )
    await answer?.body?.cancel()
    if (answer?.ok) return
    await sleep(250)
  }
  throw new SetupError('The server has not become ready within three minutes.', 'Its last lines are above.')
}

/** The address, the mail page, and who can sign in. */
function printAddress(environment) {
  const { signIns } = JSON.parse(readFileSync(DEMO_FILE, 'utf8'))
  const width = (key) => Math.max(...signIns.map((one) => one[key].length), 0)
  const [role, email] = [width('role'), width('email')]
  const rows = signIns.map(
    (one) =>
      `    ${one.role.padEnd(role)}   ${one.email.padEnd(email)}   ${one.password}${one.pin ? `   PIN ${one.pin} at a tablet` : ''}`,
  )
  const lines = [
    '',
    `  Emberstave is at ${environment.APP_ORIGIN}`,
    `  What it mails is shown at ${environment.MAIL_PAGE_URL}`,
    '',
    ...(rows.length > 0 ? ['  Sign in as (invented people of an invented cooperage)', ...rows, ''] : []),
    '  Stop with Ctrl-C.',
    '',
  ]
  process.stdout.write(`${lines.join('\n')}\n`)
}
