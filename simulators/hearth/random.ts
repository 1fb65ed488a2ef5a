import { seededRandom } from '@/lib/science/seeded-random'

/** Random numbers that are the same for the same seed, on every machine. */
export type Random = {
  /** Even over [0, 1). */
  next: () => number
  between: (low: number, high: number) => number
  /** Normal, mean 0, standard deviation 1. */
  gaussian: () => number
  chance: (probability: number) => boolean
  /** An own stream for one purpose, so that a new use elsewhere does not shift this one. */
  fork: (purpose: string) => Random
}

/** Random numbers from a seed, which is taken modulo 2^32. */
export function createRandom(seed: number): Random {
  const next = seededRandom(seed)
  // Box–Muller, one of the pair: the other would make the order of calls matter more than it should.
  const gaussian = () => Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next())
  return {
    next,
    between: (low, high) => low + (high - low) * next(),
    gaussian,
    chance: (probability) => next() < probability,
    fork: (purpose) => createRandom(hashText(purpose, seed)),
  }
}

/** FNV-1a over the UTF-16 units, begun from the seed. */
function hashText(text: string, seed: number): number {
  let hash = (2_166_136_261 ^ seed) >>> 0
  for (let i = 0; i < text.length; i += 1) {
    hash = Math.imul(hash ^ text.charCodeAt(i), 16_777_619) >>> 0
  }
  return hash
}
