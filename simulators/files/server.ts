import { createHash } from 'node:crypto'
import { createServer } from 'node:http'
import type { IncomingMessage, Server, ServerResponse } from 'node:http'
import type { ObjectFolder } from './object-folder'
import type { Keys } from './signature'
import { FilesRefusal, verifySignature } from './signature'

const LARGEST_OBJECT_BYTES = 32 * 1024 * 1024

export type FilesServerOptions = {
  /** 0 for any that is free. */
  port: number
  bucket: string
  keys: Keys
  folder: ObjectFolder
  /** The clock that signatures are held against; tests set it. */
  nowMs?: () => number
}

/**
 * A part of S3 over HTTP, by path (/bucket/key): PUT, GET, HEAD and DELETE of an object, each signed in its header or
 * beforehand. Loopback only: it is a fake.
 */
export function startFilesServer(options: FilesServerOptions): Promise<Server> {
  const server = createServer((request, response) => {
    answer(request, response, options).catch((error: unknown) => refuse(request, response, error))
  })
  return new Promise((resolve, reject) => {
    server.once('error', reject)
    server.listen(options.port, '127.0.0.1', () => resolve(server))
  })
}

async function answer(
  request: IncomingMessage,
  response: ServerResponse,
  { bucket, keys, folder, nowMs = Date.now }: FilesServerOptions,
): Promise<void> {
  const { method = '', url = '/', headers } = request
  const mustBe = verifySignature({ method, url, headers }, keys, nowMs())
  const { key, bucketNamed } = addressOf(url)
  if (bucketNamed !== bucket) throw new FilesRefusal(404, 'NoSuchBucket', 'There is no such bucket here.')
  if (key === '') throw new FilesRefusal(501, 'NotImplemented', 'This fake knows objects only.')
  if (method === 'PUT') {
    const bytes = await readBody(request)
    if (mustBe !== null && createHash('sha256').update(bytes).digest('hex') !== mustBe)
      throw new FilesRefusal(400, 'XAmzContentSHA256Mismatch', 'The body is not the one that was signed.')
    const sha256 = await folder.put(key, bytes, headers['content-type'] ?? 'application/octet-stream')
    response.writeHead(200, { etag: `"${sha256}"` }).end()
    return
  }
  if (method === 'DELETE') {
    await folder.remove(key)
    response.writeHead(204).end()
    return
  }
  if (method !== 'GET' && method !== 'HEAD')
    throw new FilesRefusal(405, 'MethodNotAllowed', 'This fake knows PUT, GET, HEAD and DELETE.')
  const found = await folder.get(key)
  if (found === null) throw new FilesRefusal(404, 'NoSuchKey', 'The specified key does not exist.')
  response
    .writeHead(200, {
      'content-type': found.contentType,
      'content-length': found.bytes.byteLength,
      etag: `"${found.sha256}"`,
    })
    .end(method === 'HEAD' ? undefined : found.bytes)
}

function addressOf(url: string): { bucketNamed: string; key: string } {
  const [bucketNamed = '', ...rest] = (url.split('?', 1)[0] ?? '').slice(1).split('/')
  return { bucketNamed, key: rest.map(decodeURIComponent).join('/') }
}

async function readBody(request: IncomingMessage): Promise<Buffer> {
  const chunks: Buffer[] = []
  let size = 0
  for await (const chunk of request) {
    size += chunk.length
    if (size > LARGEST_OBJECT_BYTES)
      throw new FilesRefusal(400, 'EntityTooLarge', 'The object is too large for this fake.')
    chunks.push(chunk)
  }
  return Buffer.concat(chunks)
}

function refuse(request: IncomingMessage, response: ServerResponse, error: unknown): void {
  const refusal =
    error instanceof FilesRefusal ? error : new FilesRefusal(500, 'InternalError', String(error))
  if (response.headersSent) {
    response.destroy()
    return
  }
  const xml = `<?xml version="1.0" encoding="UTF-8"?>\n<Error><Code>${refusal.code}</Code><Message>${escapeXml(refusal.message)}</Message></Error>`
  response
    .writeHead(refusal.status, { 'content-type': 'application/xml', connection: 'close' })
    .end(request.method === 'HEAD' ? undefined : xml)
  request.resume()
}

function escapeXml(text: string): string {
  return text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;')
}
