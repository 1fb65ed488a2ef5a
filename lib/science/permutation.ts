import { requireNumbers, requireProbability, requireWhole } from './domain'
import { USUAL_CONFIDENCE } from './estimate'
import { proportionInterval } from './proportion-interval'
import { seededRandom } from './seeded-random'

/**
 * What is asked of the groups. `f`: whether any of them lies apart (one-way F; any number of groups). `either`,
 * `greater`, `less`: whether the second mean differs from, lies above or below the first (two groups).
 */
export type PermutationQuestion = 'f' | 'either' | 'greater' | 'less'

export type PermutationOptions = {
  question: PermutationQuestion
  /** Every arrangement is counted up to this many, 50,000 unless told; above, arrangements are drawn. */
  mostCounted?: number
  /** How many arrangements are drawn, 9,999 unless told. */
  draws?: number
  /** Of the drawing; the same seed gives the same p. */
  seed?: number
  /** Of the interval of a drawn p, 0.95 unless told. */
  confidence?: number
}

export type PermutationResult = {
  /** Share of the variance that lies between the groups (`f`), or second mean minus first, in the values' unit. */
  observed: number
  /** Chance of an arrangement at least as far out as the observed one, if the groups do not differ. */
  p: number
  /** Where the p of all arrangements lies: p itself when all were counted, else the drawing's own interval. */
  pLow: number
  pHigh: number
  isExact: boolean
  /** Arrangements counted, or drawn. p cannot be below 1/count, however far apart the groups lie. */
  count: number
}

/** Two groups of nine have 48,620 arrangements; more are drawn, so that a page need not wait. */
const MOST_COUNTED = 50_000
const DRAWS = 9_999
/** A seed like any other; fixed so that a page shows the same p each time. */
const SEED = 1

/** Values with their mean taken out, one after another by group, and how far out an arrangement of them lies. */
type Arranging = {
  values: Float64Array
  sizes: readonly number[]
  /** How far out the groups' sums lie, the larger the farther. */
  extremity: (sums: Float64Array) => number
  /** Differences up to this are rounding, and count as a tie. */
  tie: number
}

/**
 * Permutation test for small groups, free of any assumption about their distribution: if the groups do not differ,
 * every way of dealing the values out to groups of these sizes is as likely. p is the share of arrangements that lie
 * at least as far out as the observed one, ties included. When there are few they are all counted and p is exact;
 * otherwise `draws` are drawn with a fixed seed, p = (b + 1)/(m + 1) (Davison and Hinkley 1997, §4.2; never 0) and the
 * interval of b/m is Clopper and Pearson's. On dose give log10.
 *
 * @throws RangeError for fewer than two groups (other than two for a question about two means), an empty group, a value
 *   that is not finite, values that do not vary, only groups of one, or an option outside its domain
 */
export function permutationTest(
  groups: readonly (readonly number[])[],
  options: PermutationOptions,
): PermutationResult {
  const mostCounted = requireWhole('mostCounted', options.mostCounted ?? MOST_COUNTED, 0)
  const draws = requireWhole('draws', options.draws ?? DRAWS, 99)
  const confidence = requireProbability('confidence', options.confidence ?? USUAL_CONFIDENCE)
  const arranging = arrange(groups, options.question)
  const observedSums = sumsInOrder(arranging)
  const observed = observedOf(arranging, options.question, observedSums)
  const reached = arranging.extremity(observedSums) - arranging.tie
  const arrangements = countArrangements(arranging.sizes)
  if (arrangements <= mostCounted) {
    const p = countReached(arranging, reached) / arrangements
    return { observed, p, pLow: p, pHigh: p, isExact: true, count: arrangements }
  }
  const drawn = drawReached(arranging, reached, draws, seededRandom(options.seed ?? SEED))
  const { low, high } = proportionInterval(drawn, draws, confidence)
  return { observed, p: (drawn + 1) / (draws + 1), pLow: low, pHigh: high, isExact: false, count: draws }
}

function arrange(groups: readonly (readonly number[])[], question: PermutationQuestion): Arranging {
  if (groups.length < 2) throw new RangeError(`groups must hold at least two groups, not ${groups.length}`)
  if (question !== 'f' && groups.length !== 2)
    throw new RangeError(`groups must hold two groups to compare their means, not ${groups.length}`)
  groups.forEach((group, i) => requireNumbers(`groups[${i}]`, group))
  const all = groups.flat()
  if (all.length === groups.length) throw new RangeError('groups must hold at least one group of two values')
  const first = all[0] ?? 0
  if (all.every((value) => value === first)) throw new RangeError('groups must vary')
  const centre = first + all.reduce((sum, value) => sum + (value - first), 0) / all.length
  const values = Float64Array.from(all, (value) => value - centre)
  const sizes = groups.map((group) => group.length)
  const size = values.reduce((most, value) => Math.max(most, Math.abs(value)), 0)
  return question === 'f'
    ? { values, sizes, extremity: betweenSquaresOf(sizes), tie: 1e-10 * size * size * all.length }
    : { values, sizes, extremity: differenceOf(sizes, question), tie: 1e-10 * size }
}

/** Σ (sum of a group)²/n, which orders arrangements as F does, the values' mean being 0 and their spread the same. */
function betweenSquaresOf(sizes: readonly number[]): (sums: Float64Array) => number {
  return (sums) => sums.reduce((total, sum, g) => total + (sum * sum) / (sizes[g] ?? 1), 0)
}

function differenceOf(
  sizes: readonly number[],
  question: Exclude<PermutationQuestion, 'f'>,
): (sums: Float64Array) => number {
  const [firstSize = 1, secondSize = 1] = sizes
  return (sums) => {
    const difference = (sums[1] ?? 0) / secondSize - (sums[0] ?? 0) / firstSize
    if (question === 'either') return Math.abs(difference)
    return question === 'greater' ? difference : -difference
  }
}

function observedOf({ values, sizes }: Arranging, question: PermutationQuestion, sums: Float64Array): number {
  if (question === 'f')
    return betweenSquaresOf(sizes)(sums) / values.reduce((total, value) => total + value * value, 0)
  return differenceOf(sizes, 'greater')(sums)
}

function sumsInOrder({ values, sizes }: Arranging): Float64Array {
  const sums = new Float64Array(sizes.length)
  let at = 0
  sizes.forEach((size, g) => {
    for (const end = at + size; at < end; at += 1) sums[g] = (sums[g] ?? 0) + (values[at] ?? 0)
  })
  return sums
}

/** N!/(n₁!·n₂!·…): ways of dealing N values out to groups of these sizes. */
function countArrangements(sizes: readonly number[]): number {
  let count = 1
  let dealt = 0
  for (const size of sizes) {
    // Each step is a binomial coefficient, whole at every point.
    for (let i = 1; i <= size; i += 1) count = (count * (dealt + i)) / i
    dealt += size
  }
  return Math.round(count)
}

/** Deals every value to every group that has room, and counts the arrangements that reach `reached`. */
function countReached({ values, sizes, extremity }: Arranging, reached: number): number {
  const sums = new Float64Array(sizes.length)
  const room = Array.from(sizes)
  const deal = (at: number): number => {
    if (at === values.length) return extremity(sums) >= reached ? 1 : 0
    let counted = 0
    for (let g = 0; g < room.length; g += 1) {
      const left = room[g] ?? 0
      if (left === 0) continue
      const before = sums[g] ?? 0
      room[g] = left - 1
      sums[g] = before + (values[at] ?? 0)
      counted += deal(at + 1)
      room[g] = left
      sums[g] = before
    }
    return counted
  }
  return deal(0)
}

/** Shuffles (Fisher and Yates) and counts the draws that reach `reached`. */
function drawReached(arranging: Arranging, reached: number, draws: number, random: () => number): number {
  const shuffled = { ...arranging, values: arranging.values.slice() }
  const { values } = shuffled
  let drawn = 0
  for (let draw = 0; draw < draws; draw += 1) {
    for (let i = values.length - 1; i > 0; i -= 1) {
      const j = Math.floor(random() * (i + 1))
      const kept = values[i] ?? 0
      values[i] = values[j] ?? 0
      values[j] = kept
    }
    if (arranging.extremity(sumsInOrder(shuffled)) >= reached) drawn += 1
  }
  return drawn
}
