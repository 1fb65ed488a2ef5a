import { createServer } from 'node:http'
import next from 'next'
import { env } from '@/lib/env'
import { prepareRequest } from '@/lib/http/prepare-request'
import { startServerWork } from '@/lib/live/start-server-work'
import { log } from '@/lib/log'

const stopWithinMs = 4_500

/** Behind a reverse proxy loopback is enough; HOST opens another address to it. */
const { PORT: port, EMBERSTAVE_MODE: mode, APP_ORIGIN: origin } = env()
const hostname = mode === 'serve' ? (process.env['HOST'] ?? '127.0.0.1') : '127.0.0.1'
const app = next({ dev: mode === 'dev', hostname, port })
const handle = app.getRequestHandler()
await app.prepare()

const server = createServer((request, response) => {
  prepareRequest(request, response)
  handle(request, response).catch((error: unknown) => {
    log().error({ err: error }, 'a request failed unexpectedly')
    if (!response.headersSent) response.writeHead(500)
    response.end()
  })
})
const work = startServerWork(server)
server.on('error', (error) => {
  log().fatal({ err: error }, `the server could not listen on ${hostname}:${port}`)
  process.exit(1)
})
server.listen(port, hostname, () => log().info(`serving ${origin} on ${hostname}:${port}`))

let isStopping = false
for (const signal of ['SIGTERM', 'SIGINT'] as const) process.on(signal, () => void stop(signal))

/** Takes no more connections, finishes what it holds, and is gone within 5 s. */
async function stop(signal: string): Promise<void> {
  if (isStopping) return
  isStopping = true
  log().info(`${signal}: finishing what is under way`)
  setTimeout(() => process.exit(1), stopWithinMs).unref()
  const closed = new Promise((resolve) => server.close(resolve))
  server.closeIdleConnections()
  await work.stop()
  server.closeIdleConnections()
  await closed
  process.exit(0)
}
