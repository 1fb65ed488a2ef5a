import { requireFinite } from './domain'

/**
 * Even random numbers over [0, 1), the same for the same seed on every machine: Mulberry32 (T. Ettinger, public
 * domain), 32 bits of state. For drawing and simulating, never for secrets.
 *
 * @param seed any number; its whole part is taken modulo 2^32
 * @throws RangeError for a seed that is not finite
 */
export function seededRandom(seed: number): () => number {
  let state = requireFinite('seed', seed) >>> 0
  return () => {
    state = (state + 0x6d2b79f5) >>> 0
    let mixed = Math.imul(state ^ (state >>> 15), state | 1)
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61)
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296
  }
}
