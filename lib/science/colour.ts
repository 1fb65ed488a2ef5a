import { converter, differenceCiede2000 } from 'culori'
import { requireWithin } from './domain'

/** CIE L*a*b*, D65 white, 2° observer: [L, a, b]; L from 0 to 100. */
export type Lab = readonly [lightness: number, a: number, b: number]

const ciede2000 = differenceCiede2000()
const toLab65 = converter('lab65')

function requireLab(name: string, lab: Lab): { mode: 'lab65'; l: number; a: number; b: number } {
  return {
    mode: 'lab65',
    l: requireWithin(`${name}[0]`, lab[0], 0, 100),
    a: requireWithin(`${name}[1]`, lab[1], -500, 500),
    b: requireWithin(`${name}[2]`, lab[2], -500, 500),
  }
}

/**
 * Colour difference CIEDE2000 with unit weights (CIE 142; Sharma, Wu and Dalal, Color Research and Application 30
 * (2005) 21). Symmetric, 0 for equal colours.
 *
 * @throws RangeError for a value that is not finite, L outside 0–100, or a or b beyond ±500
 */
export function deltaE2000(lab1: Lab, lab2: Lab): number {
  return ciede2000(requireLab('lab1', lab1), requireLab('lab2', lab2))
}

/**
 * L*a*b* (D65, 2°) of an sRGB colour (IEC 61966-2-1), channels 0–255.
 *
 * @throws RangeError for a channel that is not a number from 0 to 255
 */
export function labFromSrgb(rgb: readonly [r: number, g: number, b: number]): [number, number, number] {
  const channel = (i: 0 | 1 | 2) => requireWithin(`rgb[${i}]`, rgb[i], 0, 255) / 255
  const lab = toLab65({ mode: 'rgb', r: channel(0), g: channel(1), b: channel(2) })
  return [lab.l, lab.a, lab.b]
}
