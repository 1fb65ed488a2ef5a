import { AppError } from '@/lib/errors'
import { readBodyBytes } from '@/lib/http/read-body-bytes'

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
  const bytes = await readBodyBytes(request, limit, tooLarge)
  if (type === '') {
    if (bytes.byteLength === 0) return {}
    throw unsupported
  }
  try {
    return JSON.parse(new TextDecoder('utf-8', { fatal: true }).decode(bytes))
  } catch {
    throw new AppError('malformed', 'The body is not valid JSON.')
  }
}
