import { AppError } from '@/lib/errors'

const defaultLimit = 256 * 1024

/**
 * The body as JSON, never more than `limit` bytes of it read into memory. A request that sends nothing and says no
 * type is read as an empty object: what is optional may be left out altogether.
 * @throws AppError 'unsupported type', 'too large' or 'malformed'.
 */
export async function readJsonBody(request: Request, limit: number = defaultLimit): Promise<unknown> {
  const type = request.headers.get('content-type') ?? ''
  const unsupported = new AppError('unsupported type', 'Send JSON, with the content type application/json.')
  if (type !== '' && !/^application\/(?:[a-z.+-]+\+)?json\b/i.test(type)) throw unsupported
  const tooLarge = new AppError(
    'too large',
    `The body is over ${Math.floor(limit / 1024)} KiB. Send less at once.`,
  )
  if (Number(request.headers.get('content-length') ?? 0) > limit) throw tooLarge
  const chunks: Uint8Array[] = []
  let size = 0
  if (request.body !== null) {
    const reader = request.body.getReader()
    for (let part = await reader.read(); !part.done; part = await reader.read()) {
      size += part.value.byteLength
      if (size > limit) {
        await reader.cancel()
        throw tooLarge
      }
      chunks.push(part.value)
    }
  }
  if (type === '') {
    if (size === 0) return {}
    throw unsupported
  }
  try {
    return JSON.parse(new TextDecoder('utf-8', { fatal: true }).decode(Buffer.concat(chunks)))
  } catch {
    throw new AppError('malformed', 'The body is not valid JSON.')
  }
}
