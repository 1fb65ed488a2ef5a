import { requirePositive } from './domain'

/**
 * The shapes that a marker's response may be fitted with, as data. All are empirical: that markers form and are lost
 * with toasting is common knowledge of the trade's chemistry (from memory), the forms are ours and illustrative. Errors
 * are taken as normal and of one size; the residual plot shows whether they are.
 */

export const familyIds = [
  'line in log10 dose',
  'line in toast depth',
  'plane in log10 indices',
  'rise with dose',
  'rise and fall with dose',
] as const
export type FamilyId = (typeof familyIds)[number]

/** What of a toast a response may rest on. */
export type PredictorKey = 'doseMin' | 'slowIndexMin' | 'fastIndexMin' | 'toastDepthMm'

export type Predictor = { key: PredictorKey; name: string; unit: string }

export const predictors: Readonly<Record<PredictorKey, Predictor>> = {
  doseMin: { key: 'doseMin', name: 'dose', unit: 'min' },
  slowIndexMin: { key: 'slowIndexMin', name: 'slow index', unit: 'min' },
  fastIndexMin: { key: 'fastIndexMin', name: 'fast index', unit: 'min' },
  toastDepthMm: { key: 'toastDepthMm', name: 'toast depth', unit: 'mm' },
}

export type FamilyParameter = {
  name: string
  meaning: string
  /** Its unit in terms of the assay's unit U. */
  unit: string
  /** What is said when its interval does not keep clear of 0; null where 0 is as good as any other value. */
  whenUnclear: string | null
}

export type MarkerFamily = {
  id: FamilyId
  name: string
  formula: string
  predictors: readonly PredictorKey[]
  parameters: readonly FamilyParameter[]
  /** Linear in its parameters: least squares in one step, and results below a limit can be counted. */
  isLinear: boolean
  /** Derivatives of the value by each parameter; for a linear family its row of the design. */
  gradient: (b: readonly number[], x: readonly number[]) => number[]
  value: (b: readonly number[], x: readonly number[]) => number
  /** Why a predictor's value cannot be taken; null when it can. */
  faultOf: (x: readonly number[]) => string | null
}

const level: FamilyParameter = { name: 'a', meaning: 'level', unit: 'U', whenUnclear: null }

function linear(
  family: Pick<MarkerFamily, 'id' | 'name' | 'formula' | 'predictors' | 'parameters'> & {
    columnsOf: (x: readonly number[]) => number[]
    faultOf: MarkerFamily['faultOf']
  },
): MarkerFamily {
  const { columnsOf, ...rest } = family
  const row = (x: readonly number[]) => [1, ...columnsOf(x)]
  return {
    ...rest,
    isLinear: true,
    gradient: (_b, x) => row(x),
    value: (b, x) => row(x).reduce((sum, value, j) => sum + value * (b[j] ?? 0), 0),
  }
}

const mustBeAbove0: MarkerFamily['faultOf'] = (x) =>
  x.every((value) => value > 0) ? null : 'A dose of 0 has no logarithm.'
const mayBe0: MarkerFamily['faultOf'] = (x) =>
  x.every((value) => value >= 0) ? null : 'It cannot be below 0.'

export const markerFamilies: Readonly<Record<FamilyId, MarkerFamily>> = {
  'line in log10 dose': linear({
    id: 'line in log10 dose',
    name: 'Straight line in log10 of the dose',
    formula: 'a + b · log10(dose)',
    predictors: ['doseMin'],
    parameters: [
      level,
      {
        name: 'b',
        meaning: 'change for ten times the dose',
        unit: 'U',
        whenUnclear:
          'These results do not show that it changes with the dose. Add results at lower and higher doses.',
      },
    ],
    columnsOf: ([dose = 1]) => [Math.log10(dose)],
    faultOf: mustBeAbove0,
  }),
  'line in toast depth': linear({
    id: 'line in toast depth',
    name: 'Straight line in the toast depth (model)',
    formula: 'a + b · depth',
    predictors: ['toastDepthMm'],
    parameters: [
      level,
      {
        name: 'b',
        meaning: 'change for each mm of toast depth',
        unit: 'U/mm',
        whenUnclear:
          'These results do not show that it changes with the toast depth. Add results of shallower and deeper toasts.',
      },
    ],
    columnsOf: ([depth = 0]) => [depth],
    faultOf: mayBe0,
  }),
  'plane in log10 indices': linear({
    id: 'plane in log10 indices',
    name: 'Plane in log10 of the slow and the fast index',
    formula: 'a + b · log10(slow index) + c · log10(fast index)',
    predictors: ['slowIndexMin', 'fastIndexMin'],
    parameters: [
      level,
      {
        name: 'b',
        meaning: 'change for ten times the slow index',
        unit: 'U',
        whenUnclear:
          'These results do not tell the slow index from the fast one. Add toasts that differ in one and not in the other (low and long, high and short), or take a line in the dose.',
      },
      {
        name: 'c',
        meaning: 'change for ten times the fast index',
        unit: 'U',
        whenUnclear:
          'These results do not tell the fast index from the slow one. Add toasts that differ in one and not in the other (low and long, high and short), or take a line in the dose.',
      },
    ],
    columnsOf: ([slow = 1, fast = 1]) => [Math.log10(slow), Math.log10(fast)],
    faultOf: mustBeAbove0,
  }),
  'rise with dose': {
    id: 'rise with dose',
    name: 'Rise to a level',
    formula: 'a · (1 − exp(−k · dose))',
    predictors: ['doseMin'],
    parameters: [
      {
        name: 'a',
        meaning: 'level that it rises to',
        unit: 'U',
        whenUnclear:
          'These results do not show the level that it rises to. Add results at higher doses, or take the straight line.',
      },
      {
        name: 'k',
        meaning: 'rate of formation',
        unit: '1/min',
        whenUnclear:
          'These results do not show how fast it forms. Add results at lower doses, or take the straight line.',
      },
    ],
    isLinear: false,
    value: ([a = 0, k = 0], [dose = 0]) => -a * Math.expm1(-k * dose),
    gradient: ([a = 0, k = 0], [dose = 0]) => [-Math.expm1(-k * dose), a * dose * Math.exp(-k * dose)],
    faultOf: mayBe0,
  },
  'rise and fall with dose': {
    id: 'rise and fall with dose',
    name: 'Rise, then fall (formation and loss)',
    formula: 'a · (1 − exp(−k · dose)) · exp(−l · dose)',
    predictors: ['doseMin'],
    parameters: [
      {
        name: 'a',
        meaning: 'what would form without loss',
        unit: 'U',
        whenUnclear:
          'These results do not part formation from loss. Add results on both sides of the highest one.',
      },
      {
        name: 'k',
        meaning: 'rate of formation',
        unit: '1/min',
        whenUnclear: 'These results do not show how fast it forms. Add results at lower doses.',
      },
      {
        name: 'l',
        meaning: 'rate of loss',
        unit: '1/min',
        whenUnclear:
          'These results do not show a fall. Add results at higher doses, or take the rise to a level.',
      },
    ],
    isLinear: false,
    value: ([a = 0, k = 0, l = 0], [dose = 0]) => -a * Math.expm1(-k * dose) * Math.exp(-l * dose),
    gradient: ([a = 0, k = 0, l = 0], [dose = 0]) => {
      const loss = Math.exp(-l * dose)
      const formed = -Math.expm1(-k * dose)
      return [formed * loss, a * dose * Math.exp(-k * dose) * loss, -a * dose * formed * loss]
    },
    faultOf: mayBe0,
  },
}

/**
 * Starts for the two curves: rates whose half-lives span the doses, each with the best level for them, the closest
 * first. The level is linear, so it needs no guess.
 *
 * @param doses min, at least one above 0
 */
export function curveStarts(
  family: MarkerFamily,
  doses: readonly number[],
  y: readonly number[],
): number[][] {
  const highest = requirePositive('doses', Math.max(...doses))
  const lowest = Math.min(...doses.filter((dose) => dose > 0))
  const ratio = Math.max(4, highest / lowest)
  const rates = Array.from({ length: 9 }, (_, i) => Math.LN2 / ((lowest / 4) * (16 * ratio) ** (i / 8)))
  const tried =
    family.id === 'rise with dose'
      ? rates.map((k) => [1, k])
      : rates.flatMap((k) => rates.map((l) => [1, k, l / 4]))
  return tried
    .map((start) => withBestLevel(family, start, doses, y))
    .sort((one, other) => one.rss - other.rss)
    .slice(0, 3)
    .map(({ start }) => start)
}

function withBestLevel(
  family: MarkerFamily,
  start: readonly number[],
  doses: readonly number[],
  y: readonly number[],
): { start: number[]; rss: number } {
  let products = 0
  let squares = 0
  const shape = doses.map((dose) => family.value(start, [dose]))
  shape.forEach((value, i) => {
    products += value * (y[i] ?? 0)
    squares += value * value
  })
  const a = squares > 0 && products > 0 ? products / squares : 1
  const rss = shape.reduce((sum, value, i) => sum + ((y[i] ?? 0) - a * value) ** 2, 0)
  return { start: [a, ...start.slice(1)], rss: Number.isFinite(rss) ? rss : Infinity }
}
