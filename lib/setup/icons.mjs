import { readFile, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import sharp from 'sharp'
import { root } from './paths.mjs'
import { main, say } from './say.mjs'

// The icons of the home screen from our own mark. The PNGs are committed; run this after a change of icon.svg:
// node lib/setup/icons.mjs
const folder = join(root, 'public', 'icons')
/** A maskable icon keeps its middle 80 % whatever shape a system cuts. */
const icons = [
  { file: 'icon-192.png', px: 192, share: 1 },
  { file: 'icon-512.png', px: 512, share: 1 },
  { file: 'icon-maskable-512.png', px: 512, share: 0.8 },
  { file: '../../app/apple-icon.png', px: 180, share: 0.9 },
]

await main(async () => {
  const svg = await readFile(join(folder, 'icon.svg'))
  for (const { file, px, share } of icons) {
    const inner = Math.round(px * share)
    const edge = Math.floor((px - inner) / 2)
    const mark = await sharp(svg, { density: (72 * px) / 32 })
      .resize(inner, inner)
      .png()
      .toBuffer()
    const png = await sharp({ create: { width: px, height: px, channels: 4, background: '#10161a' } })
      .composite([{ input: mark, left: edge, top: edge }])
      .png({ compressionLevel: 9, palette: true })
      .toBuffer()
    await writeFile(join(folder, file), png)
    say(`${file}, ${px} px`)
  }
})
