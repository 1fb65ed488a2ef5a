import type { ModelWood } from './pair-model'
import { woodScalePixels, woodScalePosition } from './wood-scale'

const PIXELS = woodScalePixels()

/**
 * Paints the depth × time picture into pixels, the dose interpolated on the wood scale both ways. `width`
 * spans the picture's first to last column, `height` 0 to `depthMaxMm`; wood deeper than known is raw oak.
 */
export function paintWood(
  wood: ModelWood,
  width: number,
  height: number,
  depthMaxMm: number,
): Uint32Array<ArrayBuffer> {
  const pixels = new Uint32Array(width * height)
  const { times, depthsMm } = wood
  const rows = depthsMm.length
  const columns = Math.min(times.length, rows === 0 ? 0 : Math.floor(wood.log10Dose.length / rows))
  if (columns === 0) return pixels
  const positions = Float32Array.from({ length: columns * rows }, (_, i) =>
    woodScalePosition(wood.log10Dose[i] ?? -Infinity),
  )
  const across = sampleAxis(times, columns, width, times[0] ?? 0, times[columns - 1] ?? 0)
  const down = sampleAxis(depthsMm, rows, height, 0, depthMaxMm)
  for (let x = 0; x < width; x += 1) {
    const left = (across.index[x] ?? 0) * rows
    const right = Math.min(left + rows, (columns - 1) * rows)
    const alongX = across.share[x] ?? 0
    for (let y = 0; y < height; y += 1) {
      const upper = down.index[y] ?? 0
      const lower = Math.min(upper + 1, rows - 1)
      const alongY = down.share[y] ?? 0
      const atLeft = mix(positions[left + upper] ?? 0, positions[left + lower] ?? 0, alongY)
      const atRight = mix(positions[right + upper] ?? 0, positions[right + lower] ?? 0, alongY)
      const step = Math.round(mix(atLeft, atRight, alongX) * (PIXELS.length - 1))
      pixels[y * width + x] = PIXELS[step] ?? 0
    }
  }
  return pixels
}

function mix(from: number, to: number, share: number): number {
  return from + (to - from) * share
}

/** For each pixel's middle, the known point before it and how far it lies towards the next. */
function sampleAxis(known: Float64Array, count: number, pixels: number, low: number, high: number) {
  const index = new Int32Array(pixels)
  const share = new Float32Array(pixels)
  let at = 0
  for (let pixel = 0; pixel < pixels; pixel += 1) {
    const value = low + ((pixel + 0.5) / pixels) * (high - low)
    while (at < count - 2 && (known[at + 1] ?? NaN) <= value) at += 1
    const from = known[at] ?? 0
    const to = known[Math.min(at + 1, count - 1)] ?? from
    index[pixel] = at
    share[pixel] = to > from ? Math.min(Math.max((value - from) / (to - from), 0), 1) : 0
  }
  return { index, share }
}

export type WoodContour = { colour: string; level: number; depthsMm: number[] }

/**
 * The picture as nested areas for drawing without a canvas: for each of `levels` steps of the scale, the
 * deepest wood at or above it per column, straight between the known depths. Levels never reached are left out.
 */
export function contourWood(
  wood: ModelWood,
  levels: number,
  colourAt: (position: number) => string,
): WoodContour[] {
  const rows = wood.depthsMm.length
  const contours: WoodContour[] = []
  for (let step = 1; step <= levels; step += 1) {
    const level = (step - 0.5) / levels
    const depthsMm = Array.from(wood.times, (_, column) => deepestAt(wood, column, rows, level))
    if (depthsMm.some((depth) => depth > 0))
      contours.push({ level, colour: colourAt(step / levels), depthsMm })
  }
  return contours
}

function deepestAt(wood: ModelWood, column: number, rows: number, level: number): number {
  for (let row = rows - 1; row >= 0; row -= 1) {
    const here = woodScalePosition(wood.log10Dose[column * rows + row] ?? -Infinity)
    if (here < level) continue
    const depth = wood.depthsMm[row] ?? 0
    if (row === rows - 1) return depth
    const below = woodScalePosition(wood.log10Dose[column * rows + row + 1] ?? -Infinity)
    return depth + ((wood.depthsMm[row + 1] ?? depth) - depth) * ((here - level) / (here - below))
  }
  return 0
}
