import { seededRandom } from '../../lib/science/seeded-random'

/** A source of normal values, mean 0 and standard deviation 1, the same for the same seed (Box and Muller 1958). */
export function normalValues(seed: number): () => number {
  const next = seededRandom(seed)
  return () => Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next())
}

/** `count` values made one after another. */
export function take(count: number, next: () => number): number[] {
  return Array.from({ length: count }, () => next())
}
