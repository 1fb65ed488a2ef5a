import { AppError } from '@/lib/errors'
import { photoBytesAtMost } from '@/lib/firings/photo-kinds'
import { readBodyBytes } from '@/lib/http/read-body-bytes'

/** The picture that a request carries. @throws AppError 'too large' naming `photo` */
export async function readPhotoBody(request: Request): Promise<Buffer> {
  const sentence = `This picture is over ${photoBytesAtMost / 1024 / 1024} MB. Take it smaller.`
  const tooLarge = new AppError('too large', sentence, { fields: { photo: sentence } })
  return readBodyBytes(request, photoBytesAtMost, tooLarge)
}
