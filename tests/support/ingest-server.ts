import { createServer, type ServerResponse } from 'node:http'
import { ENROL_PATH } from '@/lib/gateway/enrol'
import { INGEST_PATH, ingestMessageSchema, type IngestMessage } from '@/lib/gateway/protocol'

export type IngestServer = {
  url: string
  /** What was taken, in order of arrival. */
  messages: IngestMessage[]
  /** Authorization headers as they came. */
  authorizations: string[]
  /** Numbers of each boot that were sent or declared lost. */
  kept: Map<string, Set<number>>
  /** Other than 200 is answered to readings as a problem. */
  answerWith: (status: number) => void
  close: () => Promise<void>
}

type Enrol = (body: unknown) => { status: number; body: unknown }

/** A server in memory for the gateway program, by HTTP alone: it acknowledges without holes, as ENGINEERING.md says. */
export async function startIngestServer(enrol?: Enrol): Promise<IngestServer> {
  const messages: IngestMessage[] = []
  const authorizations: string[] = []
  const kept = new Map<string, Set<number>>()
  let status = 200

  const take = (body: unknown) => {
    const message = ingestMessageSchema.parse(body)
    messages.push(message)
    const numbers = kept.get(message.bootId) ?? new Set()
    kept.set(message.bootId, numbers)
    for (const { seq } of message.readings) numbers.add(seq)
    for (const { from, to } of message.lost ?? []) for (let seq = from; seq <= to; seq += 1) numbers.add(seq)
    let ackedSeq = 0
    while (numbers.has(ackedSeq + 1)) ackedSeq += 1
    return { ackedSeq, refused: [] }
  }
  const answer = (path: string | undefined, body: unknown, response: ServerResponse) => {
    if (path === ENROL_PATH && enrol !== undefined) {
      const answered = enrol(body)
      reply(response, answered.status, answered.body)
    } else if (path !== INGEST_PATH) reply(response, 404, { title: 'Not found', status: 404 })
    else if (status !== 200) reply(response, status, { title: 'Refused', status })
    else reply(response, 200, take(body))
  }
  const server = createServer((request, response) => {
    const parts: Buffer[] = []
    request.on('data', (part: Buffer) => parts.push(part))
    request.on('end', () => {
      if (request.url === INGEST_PATH) authorizations.push(request.headers.authorization ?? '')
      const body: unknown = parts.length > 0 ? JSON.parse(Buffer.concat(parts).toString()) : null
      answer(request.url, body, response)
    })
  })
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  const address = server.address()
  if (address === null || typeof address === 'string') throw new Error('the server has no port')
  return {
    url: `http://127.0.0.1:${address.port}`,
    messages,
    authorizations,
    kept,
    answerWith: (next) => {
      status = next
    },
    close: () => {
      server.closeAllConnections()
      return new Promise((resolve) => server.close(() => resolve()))
    },
  }
}

function reply(response: ServerResponse, status: number, body: unknown) {
  response.writeHead(status, { 'content-type': 'application/json' }).end(JSON.stringify(body))
}
