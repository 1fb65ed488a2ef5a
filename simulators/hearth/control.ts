import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http'
import * as z from 'zod'
import { faultOrderSchema, type FaultBoard, type FaultOrder } from './fault-board'

/*
 * Faults on command, on this machine's loopback only: GET /faults lists what is wrong, POST /faults
 * {"hearth": 2, "kind": "open circuit", "forS": 60} begins one. Only JSON is taken, which a page of another site
 * cannot send without asking first.
 */

const LONGEST_BODY = 4_096

export function startControl(
  port: number,
  board: FaultBoard,
  onOrder: (order: FaultOrder) => void,
): Promise<Server> {
  const server = createServer((request, response) => {
    answer(request, board, onOrder)
      .then(({ status, body }) => reply(response, status, body))
      .catch((error: unknown) => reply(response, 500, { detail: String(error) }))
  })
  return new Promise((resolve, reject) => {
    server.once('error', reject)
    server.listen(port, '127.0.0.1', () => resolve(server))
  })
}

async function answer(
  request: IncomingMessage,
  board: FaultBoard,
  onOrder: (order: FaultOrder) => void,
): Promise<{ status: number; body: unknown }> {
  if (request.url !== '/faults') return { status: 404, body: { detail: 'Only /faults is here.' } }
  if (request.method === 'GET') return { status: 200, body: board.list() }
  if (request.method !== 'POST') return { status: 405, body: { detail: 'GET or POST.' } }
  if (!(request.headers['content-type'] ?? '').startsWith('application/json')) {
    return { status: 415, body: { detail: 'Send application/json.' } }
  }
  const parsed = faultOrderSchema.safeParse(parseJson(await readBody(request)))
  if (!parsed.success) return { status: 422, body: { detail: z.prettifyError(parsed.error) } }
  board.begin(parsed.data)
  onOrder(parsed.data)
  return { status: 200, body: board.list() }
}

async function readBody(request: IncomingMessage): Promise<string> {
  let body = ''
  for await (const chunk of request) {
    body += String(chunk)
    if (body.length > LONGEST_BODY) return ''
  }
  return body
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text)
  } catch {
    return null
  }
}

function reply(response: ServerResponse, status: number, body: unknown) {
  response.writeHead(status, { 'content-type': 'application/json' }).end(`${JSON.stringify(body)}\n`)
}
