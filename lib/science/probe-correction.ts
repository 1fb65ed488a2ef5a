import { ZERO_CELSIUS_K } from './constants'
import { requireFinite, requireNotNegative } from './domain'
import type { ProbeCheck } from './dose-interval'
import { boilingPointC, saturationPressureMpa } from './steam'

/** What a probe is checked against: melting ice, water boiling at the day's pressure, a dry block or thermometer. */
export type CheckKind = 'ice' | 'boiling' | 'block'

/** One check: what the probe said while the reference stood at a known temperature. Instants in ms since 1970. */
export type CheckRow = {
  kind: CheckKind
  referenceTempC: number
  measuredTempC: number
  /** Half-width of the comparison, °C, k = 2: reading and repeatability; for a block its own uncertainty too. */
  uncertaintyC: number
  checkedAtMs: number
  dueAtMs: number
}

/** A probe's correction by its checks, and what may be claimed of a corrected reading; null without checks. */
export type ProbeCorrection = {
  /** Adds to a reading, °C: straight between check points, the end point's outside them. */
  correctionC: (measuredTempC: number) => number
  /** Half-width of a corrected reading, °C, k = 2; null outside the checked span, where only the class can speak. */
  uncertaintyC: (measuredTempC: number) => number | null
  check: ProbeCheck | null
}

/** Where a lead probe must have been checked, °C: the dose is made there (SCIENCE §1). */
export const LEAD_CHECK_SPAN_C = { low: 180, high: 230 } as const

/** Melting point of ice at one atmosphere, °C: 0 to within 0.001 in any weather. */
const ICE_POINT_C = 0
/** A workshop's bath of melting ice, °C, k = 2 (judgement: a careful one is within 0.01). */
const ICE_UNCERTAINTY_C = 0.1
/** A barometer's reading at the place of the check, hPa, k = 2 (judgement). 1 hPa is 0.028 °C. */
const BAROMETER_UNCERTAINTY_HPA = 2
const HPA_PER_MPA = 10_000

/** Checks of one kind made within this of the newest belong to the same occasion (a block at 180 and at 230 °C). */
const OCCASION_MS = 24 * 3600 * 1000
/** Two points closer than this say the same; the newer stands. */
const SAME_POINT_C = 5

/**
 * What an ice or boiling reference stood at, °C: 0, or the saturation temperature at the station's own pressure
 * (IAPWS-IF97, `boilingPointC`), never the one reduced to sea level.
 *
 * @throws RangeError for a pressure outside the saturation line
 */
export function referencePointC(
  at: { kind: 'ice' } | { kind: 'boiling'; stationPressureHpa: number },
): number {
  return at.kind === 'ice' ? ICE_POINT_C : boilingPointC(at.stationPressureHpa)
}

/**
 * Half-width of the reference itself, °C, k = 2, that is not in the figure entered with a check: the ice bath's, or
 * what the barometer's 2 hPa are worth on the saturation line at that point. A block's stands in its own figure.
 *
 * @throws RangeError for a boiling point outside the saturation line
 */
export function referenceUncertaintyC(kind: CheckKind, referenceTempC: number): number {
  requireFinite('referenceTempC', referenceTempC)
  if (kind === 'ice') return ICE_UNCERTAINTY_C
  if (kind === 'block') return 0
  const pressureHpa = saturationPressureMpa(referenceTempC + ZERO_CELSIUS_K) * HPA_PER_MPA
  return boilingPointC(pressureHpa + BAROMETER_UNCERTAINTY_HPA) - referenceTempC
}

/** A point of the correction: at a reading of `measuredTempC` add `correctionC`, known to ± `halfC`. */
type Point = { measuredTempC: number; correctionC: number; halfC: number; dueAtMs: number }

/**
 * The correction that holds at an instant (SCIENCE §1): the points of the newest occasion of each kind that was not
 * after it, c = reference − measured at each, straight in between: c(T) = (1 − s)·c₁ + s·c₂, s = (T − T₁)/(T₂ − T₁).
 *
 * Uncertainty (k = 2): at a point the comparison and its reference as squares, u² = u_check² + u_ref²; between two,
 * which err independently, u² = ((1 − s)·u₁)² + (s·u₂)², never more than the larger, which is what `check.uncertaintyC`
 * claims for the whole span. Beyond it the end point's correction is kept, and `uncertaintyC` is null: no tighter claim
 * than the class limit is made there (`probeErrorC`). An expired check still corrects, but claims nothing.
 *
 * @throws RangeError for a check with a value that is not finite, or an uncertainty below 0
 */
export function probeCorrectionAt(checks: readonly CheckRow[], atMs: number): ProbeCorrection {
  const points = pointsAt(checks, atMs)
  const first = points[0]
  const last = points.at(-1)
  if (first === undefined || last === undefined) {
    return { correctionC: () => 0, uncertaintyC: () => null, check: null }
  }
  const lowTempC = first.measuredTempC
  const highTempC = last.measuredTempC
  return {
    correctionC: (measuredTempC) => {
      const { low, high, share } = between(points, measuredTempC)
      return low.correctionC + share * (high.correctionC - low.correctionC)
    },
    uncertaintyC: (measuredTempC) => {
      if (!(measuredTempC >= lowTempC && measuredTempC <= highTempC)) return null
      const { low, high, share } = between(points, measuredTempC)
      return Math.hypot((1 - share) * low.halfC, share * high.halfC)
    },
    check: {
      uncertaintyC: Math.max(...points.map((point) => point.halfC)),
      lowTempC,
      highTempC,
      isExpired: points.some((point) => point.dueAtMs < atMs),
    },
  }
}

/** Whether a probe's checks let it lead: what is missing, most serious first; 'in date' when nothing is. */
export type LeadCheckStanding = 'no check' | 'no hot point' | 'expired' | 'in date'

/**
 * How a lead probe's checks stand at an instant: none at all; none whose reference stood at 180–230 °C, where the dose
 * is made (ice and boiling say nothing of 200 °C); one of them past its date; or in date.
 *
 * @throws RangeError as `probeCorrectionAt`
 */
export function leadCheckStanding(checks: readonly CheckRow[], atMs: number): LeadCheckStanding {
  const points = pointsAt(checks, atMs)
  if (points.length === 0) return 'no check'
  const { low, high } = LEAD_CHECK_SPAN_C
  const hot = points.filter(({ measuredTempC, correctionC }) => {
    const referenceTempC = measuredTempC + correctionC
    return referenceTempC > low - 1e-9 && referenceTempC < high + 1e-9
  })
  if (hot.length === 0) return 'no hot point'
  return points.some((point) => point.dueAtMs < atMs) ? 'expired' : 'in date'
}

function pointsAt(checks: readonly CheckRow[], atMs: number): Point[] {
  requireFinite('atMs', atMs)
  const known = checks
    .filter((check) => check.checkedAtMs <= atMs)
    .sort((a, b) => b.checkedAtMs - a.checkedAtMs || a.measuredTempC - b.measuredTempC)
  const points: Point[] = []
  for (const check of known) {
    const newest = known.find((other) => other.kind === check.kind)
    const isOfNewest = newest !== undefined && newest.checkedAtMs - check.checkedAtMs <= OCCASION_MS
    const isNew = points.every((point) => Math.abs(point.measuredTempC - check.measuredTempC) >= SAME_POINT_C)
    if (isOfNewest && isNew) points.push(pointOf(check))
  }
  return points.sort((a, b) => a.measuredTempC - b.measuredTempC)
}

function pointOf(check: CheckRow): Point {
  requireFinite('referenceTempC', check.referenceTempC)
  requireFinite('measuredTempC', check.measuredTempC)
  requireNotNegative('uncertaintyC', check.uncertaintyC)
  return {
    measuredTempC: check.measuredTempC,
    correctionC: check.referenceTempC - check.measuredTempC,
    halfC: Math.hypot(check.uncertaintyC, referenceUncertaintyC(check.kind, check.referenceTempC)),
    dueAtMs: check.dueAtMs,
  }
}

/** The points on both sides of a reading and how far it lies between them; outside, an end point twice. */
function between(
  points: readonly Point[],
  measuredTempC: number,
): { low: Point; high: Point; share: number } {
  const after = points.findIndex((point) => point.measuredTempC >= measuredTempC)
  const high = points[after] ?? points.at(-1)
  const low = after > 0 ? points[after - 1] : high
  if (low === undefined || high === undefined) throw new RangeError('points must hold at least one point')
  if (low === high) return { low, high, share: 0 }
  return { low, high, share: (measuredTempC - low.measuredTempC) / (high.measuredTempC - low.measuredTempC) }
}
