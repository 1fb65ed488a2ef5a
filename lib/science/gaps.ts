import { requireEqualLength, requireFinite, requirePositive } from './domain'
import type { DoseModel } from './heat-dose'
import { createDoseAccumulator } from './heat-dose'
import type { SiteRules } from './site-rules'
import { straightBetween } from './straight-line'

/** Readings of one probe. `tempC` NaN is no reading. Both as long; `timeS` never falls, s from toast start. */
export type ReadingSeries = {
  timeS: ArrayLike<number>
  tempC: ArrayLike<number>
  /** Nominal time between readings, s. */
  spacingS: number
}

/** How a gap is treated: joined by a straight line; joined, with the interval widened; or nothing can be said. */
export type GapTreatment = 'interpolated' | 'widened' | 'incomplete'

/**
 * A silence inside a window. `startS` and `endS` are the last reading before and the first after, or the window's
 * own end where there is none. `missingS` is the time for which a reading was due: the silence less the nominal
 * spacing that lies between any two readings.
 */
export type Gap = { startS: number; endS: number; missingS: number; treatment: GapTreatment }

/** A window without holes: readings, and points in the gaps at about the nominal spacing. */
export type FilledSeries = {
  timeS: Float64Array
  tempC: Float64Array
  /** 1 where the point was not read: it lies in a gap, or at an edge of the window between two readings. */
  isInterpolated: Uint8Array
  gaps: Gap[]
  /** Share of the window for which readings were due and did not come. */
  missingShare: number
  /** All gaps together exceed the rule's share, or one is too long. */
  isIncomplete: boolean
}

/** Dose of the gaps as they were joined and at both extremes, minutes: what widens the interval. */
export type GapExtremes = { joinedMin: number; lowMin: number; highMin: number }

type Readings = { timeS: Float64Array; tempC: Float64Array }

/** A longer silence is a gap. */
function gapFromS(spacingS: number, rules: SiteRules['gaps']): number {
  return spacingS * rules.gapFromSpacings
}

/** Real readings only, with time checked. */
function readingsOf(series: ReadingSeries): Readings {
  requirePositive('spacingS', series.spacingS)
  requireEqualLength('timeS', series.timeS, 'tempC', series.tempC)
  const count = series.timeS.length
  const timeS = new Float64Array(count)
  const tempC = new Float64Array(count)
  let length = 0
  let lastS = -Infinity
  for (let i = 0; i < count; i += 1) {
    const time = series.timeS[i] ?? NaN
    if (!Number.isFinite(time)) throw new RangeError(`timeS[${i}] must be a finite number, not ${time}`)
    if (time < lastS) throw new RangeError(`timeS[${i}] must not fall: ${time} after ${lastS}`)
    lastS = time
    const temp = series.tempC[i] ?? NaN
    if (!Number.isFinite(temp)) continue
    timeS[length] = time
    tempC[length] = temp
    length += 1
  }
  return { timeS: timeS.subarray(0, length), tempC: tempC.subarray(0, length) }
}

function treatmentOf(missingS: number, rules: SiteRules['gaps']): GapTreatment {
  if (missingS <= rules.interpolateUpToS) return 'interpolated'
  return missingS <= rules.widenUpToS ? 'widened' : 'incomplete'
}

/**
 * Joins the gaps of a window by SCIENCE §5: up to 30 s a straight line; 30 s to 3 min a straight line and a wider
 * interval (`gapExtremes`); longer, or more than 5 % of the window in all, incomplete. A gap that reaches over an
 * edge of the window has one end only: it is held at that end's value.
 *
 * @returns null when the window holds no reading at all
 * @throws RangeError for a time that falls or is not finite, arrays of unequal length, a spacing not above 0, or a
 *   window that ends before it starts
 */
export function fillGaps(
  series: ReadingSeries,
  window: { fromS: number; toS: number },
  rules: SiteRules['gaps'],
): FilledSeries | null {
  const { fromS, toS } = window
  requireFinite('fromS', fromS)
  if (!(Number.isFinite(toS) && toS > fromS))
    throw new RangeError(`toS must lie after fromS: ${toS} after ${fromS}`)
  const readings = readingsOf(series)
  const inside = clipToWindow(readings, fromS, toS, gapFromS(series.spacingS, rules))
  if (inside === null) return null
  return joinPoints(inside, series.spacingS, rules, toS - fromS)
}

/** Points of a window, both edges included; a held edge has a reading on one side only. */
type WindowPoints = {
  timeS: Float64Array
  tempC: Float64Array
  isFirstRead: boolean
  isLastRead: boolean
  isFirstHeld: boolean
  isLastHeld: boolean
}

function clipToWindow(readings: Readings, fromS: number, toS: number, gapS: number): WindowPoints | null {
  const count = readings.timeS.length
  let first = 0
  while (first < count && (readings.timeS[first] ?? 0) < fromS) first += 1
  let after = first
  while (after < count && (readings.timeS[after] ?? 0) <= toS) after += 1
  if (first === after) return null
  const start = edgeTempC(readings, first - 1, first, fromS, gapS)
  const end = edgeTempC(readings, after, after - 1, toS, gapS)
  const offset = start === null ? 0 : 1
  const length = after - first + offset + (end === null ? 0 : 1)
  const timeS = new Float64Array(length)
  const tempC = new Float64Array(length)
  timeS.set(readings.timeS.subarray(first, after), offset)
  tempC.set(readings.tempC.subarray(first, after), offset)
  if (start !== null) {
    timeS[0] = fromS
    tempC[0] = start.tempC
  }
  if (end !== null) {
    timeS[length - 1] = toS
    tempC[length - 1] = end.tempC
  }
  return {
    timeS,
    tempC,
    isFirstRead: start === null,
    isLastRead: end === null,
    isFirstHeld: start?.isHeld ?? false,
    isLastHeld: end?.isHeld ?? false,
  }
}

/**
 * Temperature at a window's edge from the reading inside it and, when no gap lies between, the one outside.
 * Null when the inner reading stands on the edge.
 */
function edgeTempC(
  readings: Readings,
  outside: number,
  inside: number,
  edgeS: number,
  gapS: number,
): { tempC: number; isHeld: boolean } | null {
  const innerS = readings.timeS[inside] ?? NaN
  const innerC = readings.tempC[inside] ?? NaN
  if (innerS === edgeS) return null
  const outerS = readings.timeS[outside]
  const outerC = readings.tempC[outside]
  if (outerS === undefined || outerC === undefined || Math.abs(innerS - outerS) > gapS) {
    return { tempC: innerC, isHeld: true }
  }
  return { tempC: straightBetween(outerS, outerC, innerS, innerC, edgeS), isHeld: false }
}

function joinPoints(
  points: WindowPoints,
  spacingS: number,
  rules: SiteRules['gaps'],
  windowS: number,
): FilledSeries {
  const gaps = findGaps(points, spacingS, rules)
  const partsOf = (gap: Gap) => Math.ceil((gap.endS - gap.startS) / Math.max(spacingS, 1))
  const length = points.timeS.length + gaps.reduce((sum, gap) => sum + partsOf(gap) - 1, 0)
  const timeS = new Float64Array(length)
  const tempC = new Float64Array(length)
  const isInterpolated = new Uint8Array(length)
  let from = 0
  let to = 0
  for (const gap of gaps) {
    const { index } = gap
    timeS.set(points.timeS.subarray(from, index), to)
    tempC.set(points.tempC.subarray(from, index), to)
    to += index - from
    from = index
    const startC = points.tempC[index - 1] ?? NaN
    const riseC = (points.tempC[index] ?? NaN) - startC
    const parts = partsOf(gap)
    for (let part = 1; part < parts; part += 1) {
      timeS[to] = gap.startS + ((gap.endS - gap.startS) * part) / parts
      tempC[to] = startC + (riseC * part) / parts
      isInterpolated[to] = 1
      to += 1
    }
  }
  timeS.set(points.timeS.subarray(from), to)
  tempC.set(points.tempC.subarray(from), to)
  if (!points.isFirstRead) isInterpolated[0] = 1
  if (!points.isLastRead) isInterpolated[length - 1] = 1
  const missingShare = gaps.reduce((sum, gap) => sum + gap.missingS, 0) / windowS
  return {
    timeS,
    tempC,
    isInterpolated,
    gaps: gaps.map(({ startS, endS, missingS, treatment }) => ({ startS, endS, missingS, treatment })),
    missingShare,
    isIncomplete:
      missingShare > rules.incompleteAboveShare || gaps.some((gap) => gap.treatment === 'incomplete'),
  }
}

/** Gaps between neighbouring points; `index` is the point after the gap. */
function findGaps(
  points: WindowPoints,
  spacingS: number,
  rules: SiteRules['gaps'],
): (Gap & { index: number })[] {
  const gaps: (Gap & { index: number })[] = []
  const gapS = gapFromS(spacingS, rules)
  const last = points.timeS.length - 1
  for (let index = 1; index <= last; index += 1) {
    const startS = points.timeS[index - 1] ?? NaN
    const endS = points.timeS[index] ?? NaN
    if (endS - startS <= gapS) continue
    const isEdge = (index === 1 && points.isFirstHeld) || (index === last && points.isLastHeld)
    const missingS = endS - startS - (isEdge ? 0 : spacingS)
    gaps.push({ startS, endS, missingS, treatment: treatmentOf(missingS, rules), index })
  }
  return gaps
}

/**
 * Doses of all gaps longer than 30 s together: as joined, at their lower extreme (the lower end value held) and at
 * their upper (the higher of the plan and both end values, at each moment). A gap at the window's edge has one end:
 * there the lower extreme is the lower of that end and the plan.
 *
 * @param planTempCAt the plan at a time of the firing, °C
 */
export function gapExtremes(
  filled: FilledSeries,
  model: DoseModel,
  planTempCAt: (timeS: number) => number,
): GapExtremes {
  const sum: GapExtremes = { joinedMin: 0, lowMin: 0, highMin: 0 }
  let from = 0
  for (const gap of filled.gaps) {
    if (gap.treatment === 'interpolated') continue
    while ((filled.timeS[from] ?? Infinity) < gap.startS) from += 1
    addGap(sum, filled, from, gap, model, planTempCAt)
  }
  return sum
}

function addGap(
  sum: GapExtremes,
  filled: FilledSeries,
  from: number,
  gap: Gap,
  model: DoseModel,
  planTempCAt: (timeS: number) => number,
): void {
  const joined = createDoseAccumulator(model)
  const low = createDoseAccumulator(model)
  const high = createDoseAccumulator(model)
  let to = from
  while (to < filled.timeS.length - 1 && (filled.timeS[to] ?? Infinity) < gap.endS) to += 1
  const startC = filled.tempC[from] ?? NaN
  const endC = filled.tempC[to] ?? NaN
  const isOneEnded = filled.isInterpolated[from] === 1 || filled.isInterpolated[to] === 1
  for (let i = from; i <= to; i += 1) {
    const timeS = filled.timeS[i] ?? NaN
    const planC = planTempCAt(timeS)
    joined.add(timeS, filled.tempC[i] ?? NaN)
    low.add(timeS, isOneEnded ? Math.min(startC, endC, planC) : Math.min(startC, endC))
    high.add(timeS, Math.max(startC, endC, planC))
  }
  sum.joinedMin += joined.minutes
  sum.lowMin += low.minutes
  sum.highMin += high.minutes
}
