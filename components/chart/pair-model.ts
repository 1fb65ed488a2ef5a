import type {
  PairDepth,
  PairDose,
  PairDoseLine,
  PairMark,
  PairProps,
  PairSeries,
  PairStage,
  PairWood,
  PlanBandPoint,
} from './pair-types'
import type { TemperatureUnit } from '@/lib/format'

/** A curve as it is drawn: NaN for no reading, what was interpolated apart from what was measured. */
export type ModelLine = {
  name: string
  times: Float64Array
  temps: Float64Array
  interpolated: Float64Array | null
  isSelected: boolean
}

export type ModelDoseLine = { name: string | null; times: Float64Array; minutes: Float64Array }

export type ModelDose = {
  title: string
  line: ModelDoseLine
  range: { lowMin: number; highMin: number } | null
  plan: ModelDoseLine | null
  others: ModelDoseLine[]
  target: { lowMin: number; targetMin: number; highMin: number } | null
  maxMin: number
}

export type ModelWood = {
  times: Float64Array
  depthsMm: Float64Array
  log10Dose: ArrayLike<number>
  isotherm100Mm: Float64Array
  isotherm150Mm: Float64Array
  toastDepthMm: Float64Array
  lastToastRange: { low: number; high: number } | null
}

export type PairModel = {
  size: PairProps['size']
  title: string
  unit: TemperatureUnit
  planBand: readonly PlanBandPoint[]
  planName: string
  stages: readonly PairStage[]
  lead: ModelLine
  second: ModelLine | null
  others: ModelLine[]
  future: ModelLine | null
  marks: readonly PairMark[]
  wood: ModelWood | null
  dose: ModelDose | null
  nowS: number | null
  xMaxS: number
  limitC: number | null
  depthMaxMm: number
  lowC: number
  highC: number
}

/** The head is drawn only while the lead's last reading is this fresh; an older one is not now. */
export const HEAD_FRESH_S = 3
const DEFAULT_DEPTH_MAX_MM = 15
const RANGE_STEP_C = 5

/** Everything the picture needs, in typed arrays and with its ranges. */
export function buildPairModel(props: PairProps): PairModel {
  const base = {
    size: props.size,
    title: props.title,
    unit: props.unit,
    planBand: props.planBand,
    planName: props.planName ?? 'plan',
    stages: props.stages,
    lead: toLine(props.lead),
    second: props.second ? toLine(props.second) : null,
    others: (props.others ?? []).map(toLine),
    future: props.future ? toLine({ name: '', ...props.future }) : null,
    marks: props.marks ?? [],
    wood: props.wood ? toWood(props.wood) : null,
    dose: props.dose ? toDose(props.dose) : null,
    nowS: props.nowS ?? null,
    limitC: props.limitC ?? null,
    depthMaxMm: props.depthMaxMm ?? DEFAULT_DEPTH_MAX_MM,
  }
  const lines = [
    base.lead,
    ...(base.second ? [base.second] : []),
    ...base.others,
    ...(base.future ? [base.future] : []),
  ]
  return { ...base, xMaxS: findXMax(base, lines, props.xMaxS), ...findTempRange(base, lines) }
}

function toLine(series: PairSeries): ModelLine {
  const count = Math.min(series.timeS.length, series.tempC.length)
  const times = Float64Array.from({ length: count }, (_, i) => series.timeS[i] ?? NaN)
  const all = Float64Array.from({ length: count }, (_, i) => series.tempC[i] ?? NaN)
  const isInterpolated = series.isInterpolated
  const base = { name: series.name, times, isSelected: series.isSelected ?? false }
  if (isInterpolated === undefined) return { ...base, temps: all, interpolated: null }
  const isJoined = (i: number) => isInterpolated[i] === true
  const temps = all.map((temp, i) => (isJoined(i) ? NaN : temp))
  const interpolated = all.map((temp, i) => (isJoined(i) || isJoined(i - 1) || isJoined(i + 1) ? temp : NaN))
  return { ...base, temps, interpolated }
}

function toDoseLine(line: PairDoseLine): ModelDoseLine {
  return {
    name: line.name ?? null,
    times: Float64Array.from(line.timesS),
    minutes: Float64Array.from({ length: line.timesS.length }, (_, i) => line.equivalentMin[i] ?? NaN),
  }
}

function toDose(dose: PairDose): ModelDose {
  const line = toDoseLine(dose)
  const plan = dose.plan ? toDoseLine(dose.plan) : null
  const others = (dose.others ?? []).map(toDoseLine)
  let maxMin = Math.max(dose.target?.highMin ?? 0, dose.range?.highMin ?? 0)
  for (const each of [line, ...(plan ? [plan] : []), ...others]) {
    for (const minutes of each.minutes) if (minutes > maxMin) maxMin = minutes
  }
  return {
    title: dose.title,
    line,
    range: dose.range ?? null,
    plan,
    others,
    target: dose.target ?? null,
    maxMin: maxMin || 1,
  }
}

export function depthValue(depth: PairDepth | undefined): number {
  if (depth === null || depth === undefined) return NaN
  return typeof depth === 'number' ? depth : depth.value
}

function toWood(wood: PairWood): ModelWood {
  const count = wood.timesS.length
  const column = (values: ArrayLike<PairDepth>) =>
    Float64Array.from({ length: count }, (_, i) => depthValue(values[i]))
  const last = wood.toastDepthMm[count - 1]
  return {
    times: Float64Array.from(wood.timesS),
    depthsMm: Float64Array.from(wood.depthsMm),
    log10Dose: wood.log10Dose,
    isotherm100Mm: column(wood.isotherm100Mm),
    isotherm150Mm: column(wood.isotherm150Mm),
    toastDepthMm: column(wood.toastDepthMm),
    lastToastRange: typeof last === 'object' && last !== null ? { low: last.low, high: last.high } : null,
  }
}

function findXMax(
  model: { planBand: readonly PlanBandPoint[]; stages: readonly PairStage[]; nowS: number | null },
  lines: readonly ModelLine[],
  given: number | undefined,
): number {
  const ends = [
    given ?? model.planBand.at(-1)?.timeS ?? 0,
    given === undefined ? (model.stages.at(-1)?.endS ?? 0) : 0,
    model.nowS ?? 0,
    ...(given === undefined ? lines.map((line) => line.times.at(-1) ?? 0) : []),
  ]
  return Math.max(...ends, 60)
}

function findTempRange(
  model: { planBand: readonly PlanBandPoint[]; limitC: number | null },
  lines: readonly ModelLine[],
): { lowC: number; highC: number } {
  let low = Infinity
  let high = model.limitC ?? -Infinity
  for (const point of model.planBand) {
    low = Math.min(low, point.lowC)
    high = Math.max(high, point.highC)
  }
  for (const line of lines) {
    for (const temp of line.temps) {
      if (temp < low) low = temp
      if (temp > high) high = temp
    }
  }
  if (low > high) return { lowC: 20, highC: 220 }
  return widenTempRange(low, high)
}

/** The range with room above and below, in whole steps so that a live picture seldom rescales. */
export function widenTempRange(low: number, high: number): { lowC: number; highC: number } {
  const room = Math.max((high - low) * 0.08, 6)
  return {
    lowC: Math.floor((low - room) / RANGE_STEP_C) * RANGE_STEP_C,
    highC: Math.ceil((high + room) / RANGE_STEP_C) * RANGE_STEP_C,
  }
}

/** The last reading of a line that is not a gap, or null. */
export function lastReading(line: {
  times: Float64Array
  temps: Float64Array
}): { timeS: number; tempC: number } | null {
  for (let i = line.temps.length - 1; i >= 0; i -= 1) {
    const tempC = line.temps[i] ?? NaN
    if (!Number.isNaN(tempC)) return { timeS: line.times[i] ?? NaN, tempC }
  }
  return null
}
