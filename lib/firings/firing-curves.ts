import { staveOptionsOf } from '@/lib/firings/firing-stave'
import { pictureDose, pictureSeries } from '@/lib/firings/picture-series'
import type { FiringCurves, PictureStage, PictureWood } from '@/lib/firings/picture-types'
import type { FiringDto } from '@/lib/firings/schema'
import { scoreInputOf } from '@/lib/firings/score-input'
import type { FiringReadings } from '@/lib/ingest/firing-readings'
import { planDoseCurve, planOf } from '@/lib/recipes/plan-of'
import type { Plan } from '@/lib/recipes/plan-of'
import type { FilledSeries } from '@/lib/science/gaps'
import { fillGaps } from '@/lib/science/gaps'
import type { CurvePoint } from '@/lib/science/heat-dose'
import { matchStages } from '@/lib/science/score-stages'
import type { ProbePlace, ScoreInput } from '@/lib/science/score-types'
import type { SiteRules } from '@/lib/science/site-rules'
import type { DepthRangeMm, StaveHistory } from '@/lib/science/stave'
import { staveHistory } from '@/lib/science/stave'

/** How much a picture holds. */
export type PictureDetail = {
  /** At most about so many points a probe; default 1,500. */
  points?: number
  /** Of the dose line; default 300. */
  dosePoints?: number
  /** Of the stave; 0: no stave; default 160. */
  woodColumns?: number
  /** The scored toast depth, which the picture ends with: its range knows the probe's error too. */
  toastDepthMm?: DepthRangeMm | null
}

/** Grid and step of the drawn stave: a column is wider than the step, and no eye sees the difference. */
const staveCellMm = 0.3
const staveStepS = 6

/** The deepest wood that is drawn, mm. */
const shownDepthMm = 15
/** No dose at all stands this far under the scale of the wood, and is drawn raw. */
const noDoseLog10 = -9

/** "bilge A": height and side, as the room says them. */
export function placeName(place: Pick<ProbePlace, 'height' | 'side'>): string {
  return `${place.height} ${place.side}`
}

/** What is drawn of a firing. Null before the toast, or when the lead probe gave nothing since. */
export function firingCurves(
  firing: FiringDto,
  readings: FiringReadings,
  rules: SiteRules,
  detail: PictureDetail = {},
): FiringCurves | null {
  const input = scoreInputOf(firing, readings, rules)
  if (input === null || firing.recipeCopy === null || firing.toastAt === null) return null
  const endS = input.firing.restStartS ?? lastTimeS(input.lead.timeS)
  if (!(endS > 0)) return null
  const window = { fromS: 0, toS: endS }
  const lead = fillGaps(input.lead, window, rules.gaps)
  if (lead === null) return null
  const opposite = input.opposite === null ? null : fillGaps(input.opposite, window, rules.gaps)
  const plan = planOf(firing.recipeCopy.content, rules.dose)
  const names = namesOf(readings)
  const points = detail.points ?? 1500
  return {
    zeroAt: firing.toastAt,
    lead: pictureSeries(lead, names.lead, points),
    opposite: opposite === null ? null : pictureSeries(opposite, names.opposite, points),
    leadGaps: lead.gaps,
    oppositeGaps: opposite?.gaps ?? [],
    planBand: plan.band,
    stages: stagesOf(input, plan),
    dose: pictureDose(lead, rules.dose, detail.dosePoints ?? 300),
    planDose: planDoseOf(plan, rules),
    planDoseMin: plan.doseMin,
    target: { lowMin: plan.targetLowMin, targetMin: plan.targetDoseMin, highMin: plan.targetHighMin },
    wood: woodOf(firing, lead, rules, detail),
  }
}

function lastTimeS(timeS: ArrayLike<number>): number {
  return timeS[timeS.length - 1] ?? 0
}

function namesOf(readings: FiringReadings): { lead: string; opposite: string } {
  const nameOf = (role: 'lead' | 'opposite') => {
    const place = readings.series.find((series) => series.role === role)?.assignments.at(-1)?.place
    return place === undefined ? role : placeName(place)
  }
  return { lead: nameOf('lead'), opposite: nameOf('opposite') }
}

/** As they were matched; while the toast goes on, by the marks so far and the plan for the rest. */
function stagesOf(input: ScoreInput, plan: Plan): PictureStage[] {
  const marks = input.firing.stageMarks
  const endS = input.firing.restStartS ?? Math.max(plan.totalS, ...marks.map((mark) => mark.timeS))
  return matchStages(input.recipe.stages, marks, endS).map((stage) => ({
    name: stage.name,
    startS: stage.startS,
    endS: stage.endS,
    minutes: Math.round(stage.actualMinutes),
  }))
}

function planDoseOf(plan: Plan, rules: SiteRules): FiringCurves['planDose'] {
  const curve = planDoseCurve(plan.points, rules.dose)
  return {
    timesS: curve.map((point) => point.timeS),
    equivalentMin: curve.map((point) => Number(point.doseMin.toPrecision(5))),
  }
}

/** The stave under the joined curve, up to the first gap that cannot be joined: what came after is not known. */
function woodOf(
  firing: FiringDto,
  lead: FilledSeries,
  rules: SiteRules,
  detail: PictureDetail,
): PictureWood | null {
  const columns = detail.woodColumns ?? 160
  const points = stavePoints(lead)
  if (columns === 0 || (points.at(-1)?.timeS ?? 0) <= (points[0]?.timeS ?? 0)) return null
  const history = staveHistory({
    ...staveOptionsOf(firing, rules),
    points,
    columns,
    cellMm: staveCellMm,
    longestStepS: staveStepS,
  })
  const wood = trimWood(history)
  const scored = detail.toastDepthMm ?? null
  if (scored !== null && wood.timesS.at(-1) === lastTimeS(lead.timeS))
    wood.toastDepthMm[wood.toastDepthMm.length - 1] = scored
  return wood
}

function stavePoints(lead: FilledSeries): CurvePoint[] {
  const points: CurvePoint[] = []
  const openS = lead.gaps.find((gap) => gap.treatment === 'incomplete')?.startS ?? Infinity
  const last = lead.timeS.findLastIndex((timeS) => timeS <= openS)
  for (let i = 0; i <= last; i += 1) {
    const timeS = lead.timeS[i] ?? NaN
    if (i !== 0 && i !== last && timeS - (points.at(-1)?.timeS ?? 0) < staveStepS) continue
    points.push({ timeS, tempC: lead.tempC[i] ?? NaN })
  }
  return points
}

/** Down to the depth that is drawn, rounded to what can be seen. */
function trimWood(history: StaveHistory): PictureWood {
  const all = history.depthsMm.length
  const shown = history.depthsMm.filter((depthMm) => depthMm <= shownDepthMm).length
  const round = (value: number) => Math.round(value * 100) / 100
  const roundDepth = (depthMm: number | null) => (depthMm === null ? null : round(depthMm))
  return {
    timesS: history.timesS.map(round),
    depthsMm: history.depthsMm.slice(0, shown),
    log10Dose: history.timesS.flatMap((_, column) =>
      Array.from(history.log10Dose.subarray(column * all, column * all + shown), (value) =>
        round(Math.max(noDoseLog10, value)),
      ),
    ),
    isotherm100Mm: history.isotherm100Mm.map(roundDepth),
    isotherm150Mm: history.isotherm150Mm.map(roundDepth),
    toastDepthMm: history.toastDepthMm.map(({ low, value, high }) => ({
      low: round(low),
      value: round(value),
      high: round(high),
    })),
  }
}
