import type { AppError } from '@/lib/errors'

/** The body's bytes, never more than `limit` of them read into memory. @throws `tooLarge` beyond it */
export async function readBodyBytes(request: Request, limit: number, tooLarge: AppError): Promise<Buffer> {
  if (Number(request.headers.get('content-length') ?? 0) > limit) throw tooLarge
  if (request.body === null) return Buffer.alloc(0)
  const chunks: Uint8Array[] = []
  let size = 0
  const reader = request.body.getReader()
  for (let part = await reader.read(); !part.done; part = await reader.read()) {
    size += part.value.byteLength
    if (size > limit) {
      await reader.cancel()
      throw tooLarge
    }
    chunks.push(part.value)
  }
  return Buffer.concat(chunks)
}
