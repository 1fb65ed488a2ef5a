import type {
  PairDose,
  PairMark,
  PairProps,
  PairSeries,
  PairStage,
  PairWood,
  PlanBandPoint,
} from '@/components/chart/pair-types'
import { createDoseAccumulator } from '@/lib/science/heat-dose'
import type { CurvePoint, DoseModel } from '@/lib/science/heat-dose'
import { planCurve, planTempCAt } from '@/lib/science/plan'
import { staveHistory } from '@/lib/science/stave'
import { straightBetween } from '@/lib/science/straight-line'

/** An invented firing, made from fixed random numbers, for the specimens page alone. */

const dose: DoseModel = { refTempC: 200, zC: 34, baseTempC: 120 }
const BAND_C = 7

const stagePlan = [
  { name: 'Warm', kind: 'ramp', targetTempC: 150, durationS: 720 },
  { name: 'Climb', kind: 'ramp', targetTempC: 188, durationS: 480 },
  { name: 'Hold', kind: 'hold', targetTempC: 188, durationS: 1080 },
  { name: 'Deepen', kind: 'ramp', targetTempC: 198, durationS: 420 },
] as const

export const sampleStages: PairStage[] = stagePlan.map((stage, i) => {
  const startS = stagePlan.slice(0, i).reduce((sum, each) => sum + each.durationS, 0)
  return { name: stage.name, startS, endS: startS + stage.durationS, minutes: stage.durationS / 60 }
})

export const samplePlan = planCurve(60, stagePlan)

export const samplePlanBand: PlanBandPoint[] = samplePlan.map(({ timeS, tempC }) => ({
  timeS,
  lowC: tempC - BAND_C,
  midC: tempC,
  highC: tempC + BAND_C,
}))

/** A small linear congruential generator (Numerical Recipes constants): the same firing every time. */
function createRandom(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0
    return state / 2 ** 32 - 0.5
  }
}

export type SampleOptions = {
  seed: number
  endS?: number
  offC?: number
  lagS?: number
  gap?: { fromS: number; toS: number }
}

/** The lead probe, one reading a second: follows the plan late, lingers near 100 °C, wanders on the hold. */
export function sampleCurve(
  name: string,
  { seed, endS = 2700, offC = 0, lagS = 50, gap }: SampleOptions,
): PairSeries {
  const random = createRandom(seed)
  let tempC = 62 + offC
  let wanderC = 0
  const timeS: number[] = []
  const temps: (number | null)[] = []
  for (let s = 0; s <= endS; s += 1) {
    const wishC = (planTempCAt(samplePlan, Math.min(s, 2700)) ?? 198) + offC + 4 * Math.sin(s / 260 + seed)
    const drying = tempC > 92 && tempC < 104 ? 0.45 : 1
    tempC += ((wishC - tempC) / lagS) * drying
    wanderC += random() * 0.5 - wanderC * 0.02
    timeS.push(s)
    temps.push(gap !== undefined && s >= gap.fromS && s < gap.toS ? null : tempC + wanderC + random() * 0.8)
  }
  return { name, timeS, tempC: temps }
}

/** Joins the gaps of a curve by straight lines and says where. */
export function joinGaps(series: PairSeries): PairSeries {
  const tempC = Array.from(series.tempC)
  const isInterpolated = tempC.map((temp) => temp === null)
  for (let i = 0; i < tempC.length; i += 1) {
    if (tempC[i] !== null) continue
    const from = i - 1
    let to = i
    while (to < tempC.length && tempC[to] === null) to += 1
    const fromC = tempC[from] ?? 0
    const toC = tempC[to] ?? fromC
    for (let k = i; k < to; k += 1) tempC[k] = straightBetween(from, fromC, to, toC, k)
    i = to
  }
  return { ...series, tempC, isInterpolated }
}

function toPoints(series: PairSeries, everyS = 10): CurvePoint[] {
  const points: CurvePoint[] = []
  for (let i = 0; i < series.timeS.length; i += everyS) {
    const tempC = series.tempC[i]
    if (tempC !== null && tempC !== undefined) points.push({ timeS: series.timeS[i] ?? 0, tempC })
  }
  return points
}

function accumulate(points: readonly CurvePoint[]): { timesS: number[]; equivalentMin: number[] } {
  const accumulator = createDoseAccumulator(dose)
  const equivalentMin = points.map((point) => accumulator.add(point.timeS, point.tempC))
  return { timesS: points.map((point) => point.timeS), equivalentMin }
}

export function samplePlanDose(): { timesS: number[]; equivalentMin: number[] } {
  const points = Array.from({ length: 271 }, (_, i) => ({
    timeS: i * 10,
    tempC: planTempCAt(samplePlan, i * 10) ?? 0,
  }))
  return accumulate(points)
}

export function sampleDose(series: PairSeries): PairDose {
  const line = accumulate(toPoints(series))
  const last = line.equivalentMin.at(-1) ?? 0
  return {
    ...line,
    title: 'Dose at 2 mm, minutes at 200 °C',
    range: { lowMin: last * 0.9, highMin: last * 1.11 },
    plan: samplePlanDose(),
  }
}

export function sampleWood(series: PairSeries): PairWood {
  const history = staveHistory({
    thicknessMm: 27,
    probeDepthMm: 2,
    moisturePercent: 18,
    specificGravity: 0.64,
    roomTempC: 21,
    coldFaceHWPerM2K: 10,
    dose,
    toastDepthDoseMin: 0.1,
    probeDepthErrorMm: 0.5,
    diffusivityErrorShare: 0.1,
    points: toPoints(series),
    columns: 160,
  })
  // A whole copy: the history's array is a view of a longer one, which would cross to the browser entire.
  return { ...history, log10Dose: Float32Array.from(history.log10Dose) }
}

export const sampleMarks: PairMark[] = [
  { timeS: 360, words: 'feed' },
  { timeS: 780, words: 'stir' },
  { timeS: 1050, words: 'lid off' },
  { timeS: 1330, words: 'no reading' },
  { timeS: 1740, words: 'feed' },
  { timeS: 2300, words: 'lid on' },
  { timeS: 2301, words: 'turned over' },
]

/** A finished firing as the firing page shows it. */
export function sampleFinished(): PairProps {
  const lead = joinGaps(sampleCurve('bilge A', { seed: 4, endS: 2790, gap: { fromS: 1330, toS: 1352 } }))
  return {
    size: 'large',
    title: 'Barrel SML-0427-P (invented)',
    planBand: samplePlanBand,
    planName: 'plan ±7°',
    stages: sampleStages,
    lead,
    second: sampleCurve('bilge B', { seed: 9, endS: 2790, offC: -3.5 }),
    marks: sampleMarks,
    wood: sampleWood(lead),
    dose: sampleDose(lead),
    unit: 'C',
  }
}

/** A firing under way, seen at `nowS`. */
export function sampleLive(nowS: number, options: Partial<SampleOptions> = {}): PairProps {
  const lead = sampleCurve('bilge A', { seed: 4, endS: nowS, ...options })
  return {
    size: 'large',
    title: 'Hearth 2, barrel SML-0427-P (invented)',
    planBand: samplePlanBand,
    stages: sampleStages.map((stage) => ({ ...stage, isCurrent: nowS >= stage.startS && nowS < stage.endS })),
    lead,
    second: sampleCurve('bilge B', { seed: 9, endS: nowS, offC: -3.5 }),
    future: { timeS: [nowS + 20, nowS + 480], tempC: [189, 191] },
    marks: sampleMarks.filter((mark) => mark.timeS < nowS && mark.words !== 'no reading'),
    wood: sampleWood(lead),
    nowS,
    unit: 'C',
  }
}
