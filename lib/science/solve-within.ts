import { findRoot } from './root'

/** What is sought: x in [min, max] at which `valueAt` is what is wanted. */
export type Search = {
  valueAt: (x: number) => number
  min: number
  max: number
  /** Below 0 where a value is too small, above 0 where it is too large; rises with the value. */
  excess: (value: number) => number
  /** Whether a value is as good as the wanted one. */
  isSame: (value: number) => boolean
  /** The value is a straight line in x: its root is written down, not searched. */
  isStraight?: boolean
  /** Even parts that are looked through for a change of sign. Default 1: the value only rises with x. */
  parts?: number
  /** As `findRoot`. */
  toleranceX?: number
}

/**
 * `x` with its value; or that none gives it, with the lowest and highest value met, and `jump` when the wanted one lies
 * inside a jump of the value.
 */
export type Found =
  | { isFound: true; x: number; value: number }
  | { isFound: false; low: number; high: number; jump: { from: number; to: number } | null }

/**
 * Solves value(x) = wanted within limits, looking from `min` on: the first looked-at point that is as good as wanted, or
 * the root in the first part over which the excess changes sign (closed form for a straight line, Brent otherwise).
 */
export function solveWithin(search: Search): Found {
  const { valueAt, min, max, excess, isSame, isStraight = false, parts = 1, toleranceX } = search
  const looked: { x: number; value: number }[] = []
  for (let part = 0; part <= parts; part += 1) {
    const x = part === parts ? max : min + ((max - min) * part) / parts
    const to = { x, value: valueAt(x) }
    if (isSame(to.value)) return { isFound: true, ...to }
    const from = looked.at(-1)
    looked.push(to)
    if (from === undefined || excess(from.value) < 0 === excess(to.value) < 0) continue
    if (isStraight) return onStraight(search, from, to)
    return atRoot(
      search,
      findRoot((at) => excess(valueAt(at)), from.x, to.x, toleranceX),
    )
  }
  const values = looked.map(({ value }) => value)
  return { isFound: false, low: Math.min(...values), high: Math.max(...values), jump: null }
}

type Looked = { x: number; value: number }

function onStraight({ valueAt, excess }: Search, from: Looked, to: Looked): Found {
  const share = excess(from.value) / (excess(from.value) - excess(to.value))
  const x = from.x + (to.x - from.x) * share
  return { isFound: true, x, value: valueAt(x) }
}

/** What stands at a root: the wanted value, or a jump over it. */
function atRoot({ valueAt, min, max, isSame, toleranceX = 0 }: Search, x: number): Found {
  const value = valueAt(x)
  if (isSame(value)) return { isFound: true, x, value }
  const hair = Math.max(1e-9 * Math.max(1, Math.abs(x)), 2 * toleranceX)
  const beside = [valueAt(Math.max(min, x - hair)), valueAt(Math.min(max, x + hair))]
  if (beside.some(isSame)) return { isFound: true, x, value }
  const ends = [valueAt(min), valueAt(max)]
  return {
    isFound: false,
    low: Math.min(...ends),
    high: Math.max(...ends),
    jump: { from: Math.min(...beside), to: Math.max(...beside) },
  }
}
