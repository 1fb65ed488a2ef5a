import type { IncomingMessage, ServerResponse } from 'node:http'
import { createServer } from 'node:http'
import { Readable } from 'node:stream'
import { env } from '@/lib/env'
import { INGEST_PATH } from '@/lib/gateway/protocol'
import { problemResponse } from '@/lib/http/problem'
import { checkReady } from '@/lib/ingest/check-health'
import { gatewayRoute } from '@/lib/ingest/gateway-route'
import { storeReadings } from '@/lib/ingest/store-readings'
import { startServerWork } from '@/lib/live/start-server-work'
import { log } from '@/lib/log'

/*
 * The server without Next's pages, so that a hundred restarts are affordable: everything that takes readings in, gives
 * them out, seals and scores is what server.ts starts. The whole built app is killed in tests/journeys.
 */

const ingest = gatewayRoute(storeReadings)

const server = createServer((request, response) => {
  answer(request)
    .catch((error: unknown) => problemResponse(error))
    .then(async (answered) => {
      response.writeHead(answered.status, Object.fromEntries(answered.headers))
      response.end(await answered.text())
    })
    .catch((error: unknown) => {
      log().error({ err: error }, 'an answer could not be given')
      giveUp(response)
    })
})
// It does not outlive the suite that started it.
process.on('disconnect', () => process.exit(0))
startServerWork(server)
server.listen(env().PORT, '127.0.0.1')

async function answer(request: IncomingMessage): Promise<Response> {
  if (request.url === '/api/health/ready') return Response.json(await checkReady())
  if (request.url !== INGEST_PATH || request.method !== 'POST') return new Response(null, { status: 404 })
  const headers = new Headers()
  for (const [name, value] of Object.entries(request.headers)) {
    if (typeof value === 'string') headers.set(name, value)
  }
  const body = Buffer.concat(await Readable.from(request).toArray())
  return ingest(new Request(`http://127.0.0.1${INGEST_PATH}`, { method: 'POST', headers, body }))
}

function giveUp(response: ServerResponse): void {
  if (!response.headersSent) response.writeHead(500)
  response.end()
}
