import { createHash } from 'node:crypto'
import { fileTypeFromBuffer } from 'file-type'
import sharp from 'sharp'
import { invalidField, isAppError } from '@/lib/errors'
import { shared } from '@/lib/runtime'

/** Longest side of what is kept, and of its small form, px. */
export const LARGE_PX = 2048
export const THUMBNAIL_PX = 400
/** A picture of more pixels than this is not opened: 50 million take some 200 MB while they are worked on. */
const MOST_PIXELS = 50_000_000
const LONGEST_WORK_S = 20

export type PhotoType = 'image/jpeg' | 'image/png' | 'image/webp'

export type PreparedPhoto = {
  /** What it came as, by its content. */
  sourceType: PhotoType
  large: Buffer
  thumbnail: Buffer
  widthPx: number
  heightPx: number
  /** Of `large`. */
  sha256: string
}

/** Pictures are opened one at a time: each takes memory in step with its pixels. */
function turn(): { last: Promise<unknown> } {
  return shared('photos in turn', () => {
    sharp.cache(false)
    sharp.concurrency(1)
    return { last: Promise.resolve() }
  })
}

/**
 * Makes of whatever was sent what may be kept: told by its content and not its name, turned upright, without metadata
 * (place, camera, date), in sRGB, as JPEG within 2048 px and within 400 px.
 * @throws AppError 'invalid' naming the field `photo`, with what would do
 */
export async function preparePhoto(bytes: Buffer): Promise<PreparedPhoto> {
  const sourceType = await sniff(bytes)
  const before = turn()
  const work = before.last.then(() => redraw(bytes, sourceType))
  before.last = work.catch(() => undefined)
  return work
}

async function sniff(bytes: Buffer): Promise<PhotoType> {
  if (bytes.byteLength === 0) throw invalidField('photo', 'Choose a picture.')
  const type = (await fileTypeFromBuffer(bytes))?.mime
  if (type === 'image/jpeg' || type === 'image/png' || type === 'image/webp') return type
  if (type !== undefined && /^image\/(hei[cf]|avif)/.test(type)) {
    throw invalidField(
      'photo',
      'This is a HEIC picture, which cannot be opened here. Set the camera to JPEG (“most compatible”) and take it again.',
    )
  }
  throw invalidField(
    'photo',
    'This is no JPEG, PNG or WebP picture, whatever its name says. Send one of those.',
  )
}

async function redraw(bytes: Buffer, sourceType: PhotoType): Promise<PreparedPhoto> {
  try {
    const { width, height } = await open(bytes).metadata()
    if (width * height > MOST_PIXELS) throw tooManyPixels()
    const large = await shrink(bytes, LARGE_PX, 82)
    const thumbnail = await shrink(large.data, THUMBNAIL_PX, 76)
    return {
      sourceType,
      large: large.data,
      thumbnail: thumbnail.data,
      widthPx: large.info.width,
      heightPx: large.info.height,
      sha256: createHash('sha256').update(large.data).digest('hex'),
    }
  } catch (error) {
    if (isAppError(error)) throw error
    if (error instanceof Error && /pixel limit/i.test(error.message)) throw tooManyPixels()
    throw invalidField('photo', 'This picture is damaged and cannot be opened. Take it again.')
  }
}

function tooManyPixels() {
  return invalidField('photo', 'This picture has more than 50 million pixels. Take it smaller.')
}

function open(bytes: Buffer) {
  return sharp(bytes, { limitInputPixels: MOST_PIXELS, failOn: 'error' })
}

/** Upright first, then within the square; sharp writes no metadata unless told to. */
function shrink(bytes: Buffer, px: number, quality: number) {
  return open(bytes)
    .autoOrient()
    .resize(px, px, { fit: 'inside', withoutEnlargement: true })
    .flatten({ background: '#ffffff' })
    .toColourspace('srgb')
    .jpeg({ quality, mozjpeg: true })
    .timeout({ seconds: LONGEST_WORK_S })
    .toBuffer({ resolveWithObject: true })
}
