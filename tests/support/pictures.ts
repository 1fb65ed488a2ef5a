import { crc32, deflateSync } from 'node:zlib'
import sharp from 'sharp'

/** A picture of a known size: its left half dark, its right half light, so that turning it shows. */
export async function picture(
  format: 'jpeg' | 'png' | 'webp' | 'tiff' | 'gif',
  size: { width: number; height: number } = { width: 640, height: 480 },
): Promise<Buffer> {
  const { width, height } = size
  const right = await sharp({
    create: { width: Math.ceil(width / 2), height, channels: 3, background: '#eaddbd' },
  })
    .png()
    .toBuffer()
  return sharp({ create: { width, height, channels: 3, background: '#2f1c15' } })
    .composite([{ input: right, left: Math.floor(width / 2), top: 0 }])
    .toFormat(format)
    .toBuffer()
}

/** A JPEG as a telephone makes it: lying on its side by its orientation tag, with the place and the camera in it. */
export async function telephonePicture(): Promise<Buffer> {
  return sharp(await picture('png'))
    .withExif({
      IFD0: { Make: 'Invented', Model: 'Telephone 1' },
      IFD3: {
        GPSLatitudeRef: 'N',
        GPSLatitude: '51/1 30/1 0/1',
        GPSLongitudeRef: 'W',
        GPSLongitude: '1/1 7/1 0/1',
      },
    })
    .withMetadata({ orientation: 6 })
    .jpeg()
    .toBuffer()
}

/** A true PNG of 144 million black pixels in about 18 KB. */
export function decompressionBomb(): Buffer {
  const [width, height] = [12_000, 12_000]
  const header = Buffer.alloc(13)
  header.writeUInt32BE(width, 0)
  header.writeUInt32BE(height, 4)
  // One bit a pixel, grey.
  header.writeUInt8(1, 8)
  const rows = Buffer.alloc((1 + width / 8) * height)
  return Buffer.concat([
    Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]),
    chunk('IHDR', header),
    chunk('IDAT', deflateSync(rows)),
    chunk('IEND', Buffer.alloc(0)),
  ])
}

function chunk(name: string, data: Buffer): Buffer {
  const named = Buffer.concat([Buffer.from(name, 'latin1'), data])
  const framed = Buffer.alloc(8 + named.length)
  framed.writeUInt32BE(data.length, 0)
  named.copy(framed, 4)
  framed.writeUInt32BE(crc32(named), 4 + named.length)
  return framed
}
