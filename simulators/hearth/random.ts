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

/** Mulberry32 (T. Ettinger, public domain): 32 bits of state, ample for a hearth. `seed` is taken modulo 2^32. */
export function createRandom(seed: number): Random {
  let state = seed >>> 0
  const next = () => {
    state = (state + 0x6d2b79f5) >>> 0
    let mixed = Math.imul(state ^ (state >>> 15), state | 1)
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61)
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296
  }
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
