import { requireEqualLength, requireNotNegative } from './domain'
import { doseFactorFromOffset, ratioFromLog10 } from './dose-ratio'
import type { GapExtremes } from './gaps'
import type { DoseModel } from './heat-dose'
import { createDoseAccumulator } from './heat-dose'
import type { SiteRules } from './site-rules'
import type { ThermocoupleType } from './thermocouple'
import { toleranceC } from './thermocouple'

/**
 * An interval about a dose, minutes at the reference temperature; half-widths in log10, k = 2. `log10Half` is the
 * wider side. A half-width is null when it has no number: the dose is 0, or its low end is.
 */
export type DoseBounds = {
  lowMin: number
  highMin: number
  log10Low: number | null
  log10High: number | null
  log10Half: number | null
}

/** A dose and its two intervals: absolute for certificates, same mount for judging against the recipe. */
export type DoseResult = {
  doseMin: number
  /** Null when the dose is 0. */
  log10Dose: number | null
  /** Null when the probe's class makes no claim at these temperatures. */
  absolute: DoseBounds | null
  sameMount: DoseBounds
  /** The same-mount figure is the assumed one, not the site's own. */
  isAssumed: boolean
}

/** A probe check that the readings were corrected by. */
export type ProbeCheck = {
  /** Half-width of the corrected reading, °C, k = 2, between the outermost check points. */
  uncertaintyC: number
  lowTempC: number
  highTempC: number
  isExpired: boolean
}

export type ProbeErrorFacts = { type: ThermocoupleType; iecClass: 1 | 2 | 3; check: ProbeCheck | null }

export type DoseIntervalInput = {
  /** A curve without holes; straight between points. */
  timeS: ArrayLike<number>
  tempC: ArrayLike<number>
  model: DoseModel
  probe: ProbeErrorFacts
  errors: SiteRules['errors']
  /** Null: no gap that widens. */
  gaps: GapExtremes | null
}

/**
 * Error of a probe's corrected reading, °C, k = 2. Where a check that has not expired spans from `fromTempC` to
 * `toTempC`: the check's uncertainty. Elsewhere no tighter claim than the limit of its IEC class at `toTempC` is made,
 * nor a tighter one than the check itself made: the larger of the two. Null where the class makes no claim.
 */
export function probeErrorC(probe: ProbeErrorFacts, fromTempC: number, toTempC: number): number | null {
  const { check } = probe
  const checkedC = check === null ? 0 : requireNotNegative('uncertaintyC', check.uncertaintyC)
  if (check !== null && !check.isExpired && check.lowTempC <= fromTempC && check.highTempC >= toTempC) {
    return checkedC
  }
  const classC = toleranceC(probe.type, probe.iecClass, toTempC)
  return classC === null ? null : Math.max(classC, checkedC)
}

/**
 * Doses of one curve as if every reading were off by each offset: ∫ 10^((T + d − Tref)/z) dt where T + d is at or
 * above the base.
 *
 * The curve is integrated again, shifted, not scaled by 10^(d/z): near the base an offset brings minutes in or out.
 * No second integration is needed away from it, since dose(T + d, base b) = 10^(d/z) · dose(T, base b − d) exactly:
 * the segments that lie above every shifted base are taken from `doseMin`, the unshifted dose of the same curve.
 *
 * @throws RangeError as `createDoseAccumulator` does
 */
export function shiftedDosesMin(
  model: DoseModel,
  timeS: ArrayLike<number>,
  tempC: ArrayLike<number>,
  offsetsC: readonly number[],
  doseMin: number,
): number[] {
  requireEqualLength('timeS', timeS, 'tempC', tempC)
  const scales = offsetsC.map((offsetC) => doseFactorFromOffset(model, offsetC))
  const { baseTempC } = model
  if (baseTempC === undefined) return scales.map((scale) => scale * doseMin)
  const shifted = offsetsC.map((offsetC) =>
    createDoseAccumulator({ ...model, baseTempC: baseTempC - offsetC }),
  )
  const unshifted = createDoseAccumulator(model)
  const lowestBaseC = baseTempC - Math.max(0, ...offsetsC)
  const highestBaseC = baseTempC - Math.min(0, ...offsetsC)
  for (let i = 1; i < timeS.length; i += 1) {
    const from = tempC[i - 1] ?? NaN
    const to = tempC[i] ?? NaN
    if ((from >= highestBaseC && to >= highestBaseC) || (from < lowestBaseC && to < lowestBaseC)) continue
    for (const dose of shifted) addSegment(dose, timeS, tempC, i)
    addSegment(unshifted, timeS, tempC, i)
  }
  const aboveAllMin = Math.max(0, doseMin - unshifted.minutes)
  return shifted.map((dose, i) => (scales[i] ?? NaN) * (dose.minutes + aboveAllMin))
}

function addSegment(
  dose: ReturnType<typeof createDoseAccumulator>,
  timeS: ArrayLike<number>,
  tempC: ArrayLike<number>,
  to: number,
): void {
  dose.break()
  dose.add(timeS[to - 1] ?? NaN, tempC[to - 1] ?? NaN)
  dose.add(timeS[to] ?? NaN, tempC[to] ?? NaN)
}

/** Half-widths in log10 below and above; Infinity below when the low end is no dose at all. */
export type Half = { low: number; high: number }

function combine(halves: readonly Half[]): Half {
  return {
    low: Math.sqrt(halves.reduce((sum, half) => sum + half.low * half.low, 0)),
    high: Math.sqrt(halves.reduce((sum, half) => sum + half.high * half.high, 0)),
  }
}

function boundsOf(doseMin: number, halves: readonly Half[]): DoseBounds {
  const { low, high } = combine(halves)
  const log10Low = Number.isFinite(low) ? low : null
  return {
    lowMin: log10Low === null ? 0 : doseMin * ratioFromLog10(-log10Low),
    highMin: doseMin * ratioFromLog10(high),
    log10Low,
    log10High: high,
    log10Half: log10Low === null ? null : Math.max(log10Low, high),
  }
}

/**
 * A dose with its two intervals, k = 2 (SCIENCE §2). Each error is one fixed offset for the whole firing, applied by
 * integrating the shifted curve again; the half-widths so found are combined as squares in log10.
 *
 * *Absolute*: probe (its check, or its class), cold junction, mount, gaps. *Same mount*: the site's repeatability of
 * placing the probe, and gaps; drift too once the site has measured its own, since the assumed figure covers it.
 *
 * @throws RangeError for no points, a time that falls, or values that are not finite
 */
export function doseInterval(input: DoseIntervalInput): DoseResult {
  const { timeS, tempC, model, errors, gaps } = input
  if (timeS.length === 0) throw new RangeError('timeS must hold at least one time')
  let highestC = -Infinity
  const dose = createDoseAccumulator(model)
  for (let i = 0; i < timeS.length; i += 1) {
    dose.add(timeS[i] ?? NaN, tempC[i] ?? NaN)
    highestC = Math.max(highestC, tempC[i] ?? NaN)
  }
  const doseMin = dose.minutes
  const probeC = probeErrorC(input.probe, Math.min(model.baseTempC ?? highestC, highestC), highestC)
  const absoluteOffsetsC = probeC === null ? null : [probeC, errors.coldJunctionC, errors.mountC]
  const sameMountOffsetsC = errors.isSameMountAssumed ? [] : [errors.driftC]
  const shift = (offsetsC: readonly number[]) => shiftedDosesMin(model, timeS, tempC, offsetsC, doseMin)
  if (doseMin === 0) return withoutDose(shift, absoluteOffsetsC, gaps, errors.isSameMountAssumed)

  const halvesOf = (offsetsC: readonly number[]): Half[] => {
    if (offsetsC.length === 0) return []
    const shifted = shift([0, ...offsetsC, ...offsetsC.map((offsetC) => -offsetC)])
    const unshifted = shifted[0] ?? NaN
    return offsetsC.map((_, i) => ({
      low: Math.log10(unshifted / (shifted[1 + offsetsC.length + i] ?? NaN)),
      high: Math.log10((shifted[1 + i] ?? NaN) / unshifted),
    }))
  }
  const gapHalf = gaps === null ? [] : [gapHalfLog10(doseMin, gaps)]
  const sameMount = { low: errors.sameMountLog10, high: errors.sameMountLog10 }
  return {
    doseMin,
    log10Dose: Math.log10(doseMin),
    absolute:
      absoluteOffsetsC === null ? null : boundsOf(doseMin, [...halvesOf(absoluteOffsetsC), ...gapHalf]),
    sameMount: boundsOf(doseMin, [sameMount, ...halvesOf(sameMountOffsetsC), ...gapHalf]),
    isAssumed: errors.isSameMountAssumed,
  }
}

/**
 * What gaps that widen do to a dose, log10 below and above, k = 2: its gaps at their lower and upper extreme in place of
 * as they were joined. Infinity below when nothing but the gaps counted.
 *
 * @param doseMin above 0, gaps joined
 */
export function gapHalfLog10(doseMin: number, gaps: GapExtremes): Half {
  const lowMin = doseMin - gaps.joinedMin + gaps.lowMin
  const highMin = doseMin - gaps.joinedMin + gaps.highMin
  return {
    low: lowMin > 0 ? Math.max(0, Math.log10(doseMin / lowMin)) : Infinity,
    high: Math.max(0, Math.log10(highMin / doseMin)),
  }
}

/** No dose has no logarithm: the high end is what the errors, added as squares in °C, could have hidden. */
function withoutDose(
  shift: (offsetsC: readonly number[]) => number[],
  absoluteOffsetsC: readonly number[] | null,
  gaps: GapExtremes | null,
  isAssumed: boolean,
): DoseResult {
  const gapMin = gaps === null ? 0 : gaps.highMin
  const bounds = (highMin: number): DoseBounds => ({
    lowMin: 0,
    highMin,
    log10Low: null,
    log10High: null,
    log10Half: null,
  })
  return {
    doseMin: 0,
    log10Dose: null,
    absolute:
      absoluteOffsetsC === null ? null : bounds((shift([Math.hypot(...absoluteOffsetsC)])[0] ?? 0) + gapMin),
    sameMount: bounds(gapMin),
    isAssumed,
  }
}

/** A dose counted for bend or rest: silences longer than `breakS` count nothing. Null when fewer than two readings. */
export function readDoseMin(
  model: DoseModel,
  timeS: ArrayLike<number>,
  tempC: ArrayLike<number>,
  window: { fromS: number; toS: number },
  breakS: number,
): number | null {
  const dose = createDoseAccumulator(model)
  let lastS = -Infinity
  let count = 0
  for (let i = 0; i < timeS.length; i += 1) {
    const time = timeS[i] ?? NaN
    const temp = tempC[i] ?? NaN
    if (!(time >= window.fromS && time <= window.toS) || !Number.isFinite(temp)) continue
    if (time - lastS > breakS) dose.break()
    dose.add(time, temp)
    lastS = time
    count += 1
  }
  return count < 2 ? null : dose.minutes
}
