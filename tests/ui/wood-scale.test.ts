import { readFileSync } from 'node:fs'
import {
  converter,
  differenceCiede2000,
  filterDeficiencyDeuter,
  filterDeficiencyProt,
  formatHex,
  interpolate,
} from 'culori'
import { expect, test } from 'vitest'
import { woodColour, woodScalePixels, woodScalePosition } from '@/components/chart/wood-scale'

const css = readFileSync('app/globals.css', 'utf8')
const tokens = [...css.matchAll(/--wood-\d: (#[0-9a-f]{6});/g)].map((match) => match[1] ?? '')
const toLab = converter('lab65')
const difference = differenceCiede2000()

test('the kept table is the eight wood tokens interpolated in Oklab', () => {
  expect(tokens).toHaveLength(8)
  const scale = interpolate(tokens, 'oklab')
  for (let step = 0; step < 256; step += 1) expect(woodColour(step / 255)).toBe(formatHex(scale(step / 255)))
})

test('lightness falls from raw oak to char without a turn', () => {
  const lightness = Array.from({ length: 256 }, (_, step) => toLab(woodColour(step / 255))?.l ?? NaN)
  // A table of eight-bit colours may stand still for one step, never rise by more than its rounding.
  for (let i = 1; i < 256; i += 1) expect(lightness[i]).toBeLessThanOrEqual((lightness[i - 1] ?? NaN) + 0.15)
  for (let i = 4; i < 256; i += 4) expect(lightness[i]).toBeLessThan(lightness[i - 4] ?? NaN)
})

test('steps of one part in 32 are even: CIEDE2000 2.0 to 3.2, within the rounding of eight-bit colours', () => {
  for (let i = 0; i < 32; i += 1) {
    const step = difference(woodColour(i / 32), woodColour((i + 1) / 32))
    expect(step).toBeGreaterThanOrEqual(2.0 - 0.35)
    expect(step).toBeLessThanOrEqual(3.2 + 0.35)
  }
  const exact = interpolate(tokens, 'oklab')
  for (let i = 0; i < 32; i += 1) {
    const step = difference(exact(i / 32), exact((i + 1) / 32))
    expect(step).toBeGreaterThanOrEqual(2.0)
    expect(step).toBeLessThanOrEqual(3.2)
  }
})

/** Machado, Oliveira and Fernandes (2009), severity 1, as culori has them. */
test.each([
  ['red-blind', filterDeficiencyProt(1)],
  ['green-blind', filterDeficiencyDeuter(1)],
])('each step is still seen by a %s eye, finely as far as dark toast', (_, see) => {
  const exact = interpolate(tokens, 'oklab')
  for (let i = 0; i < 32; i += 1) {
    const from = see(exact(i / 32))
    const to = see(exact((i + 1) / 32))
    if (from === undefined || to === undefined) throw new Error('no colour')
    expect(difference(from, to)).toBeGreaterThan(i < 28 ? 1.7 : 1)
  }
})

test('position follows u = (log10 E + 2.6)/5 and stays on the scale', () => {
  expect(woodScalePosition(-2.6)).toBe(0)
  expect(woodScalePosition(2.4)).toBe(1)
  expect(woodScalePosition(-0.1)).toBeCloseTo(0.5, 12)
  expect(woodScalePosition(-Infinity)).toBe(0)
  expect(woodScalePosition(9)).toBe(1)
  expect(woodScalePosition(NaN)).toBe(0)
})

test('pixels are the same colours, opaque', () => {
  const pixels = woodScalePixels()
  const bytes = new Uint8Array(pixels.buffer)
  for (const step of [0, 100, 255]) {
    const [red, green, blue, alpha] = bytes.subarray(step * 4, step * 4 + 4)
    expect(woodColour(step / 255)).toBe(
      `#${[red, green, blue].map((byte) => (byte ?? 0).toString(16).padStart(2, '0')).join('')}`,
    )
    expect(alpha).toBe(255)
  }
})
