import type { PictureDose, PictureSeries } from '@/lib/firings/picture-types'
import { downsampleKeepingExtremes } from '@/lib/science/curve'
import type { FilledSeries, Gap } from '@/lib/science/gaps'
import type { DoseModel } from '@/lib/science/heat-dose'
import { createDoseAccumulator } from '@/lib/science/heat-dose'
import { straightBetween } from '@/lib/science/straight-line'

const toHundredth = (value: number) => Math.round(value * 100) / 100

/** The gap that an interpolated point lies in, or undefined: a point read, or joined at the window's edge. */
function gapFinder(gaps: readonly Gap[]): (timeS: number) => Gap | undefined {
  let index = 0
  return (timeS) => {
    while (index < gaps.length && (gaps[index]?.endS ?? Infinity) < timeS) index += 1
    const gap = gaps[index]
    return gap !== undefined && timeS >= gap.startS ? gap : undefined
  }
}

/**
 * A curve for drawing, at most about `points` of it, extremes kept. Gaps that the score joins (SCIENCE §5) are joined
 * by one straight line that says that it was; a longer one stays open.
 */
export function pictureSeries(filled: FilledSeries, name: string, points: number): PictureSeries {
  const gapAt = gapFinder(filled.gaps)
  const read = Array.from(filled.tempC, (tempC, i) =>
    filled.isInterpolated[i] === 1 && gapAt(filled.timeS[i] ?? NaN) !== undefined ? NaN : tempC,
  )
  const thin = downsampleKeepingExtremes(Array.from(filled.timeS), read, Math.max(2, Math.floor(points / 4)))
  const timeS = thin.times.map(toHundredth)
  if (filled.gaps.length === 0) return { name, timeS, tempC: thin.values.map(toHundredth) }
  const treatmentAt = gapFinder(filled.gaps)
  const isInterpolated = thin.values.map(
    (value, i) => Number.isNaN(value) && treatmentAt(thin.times[i] ?? NaN)?.treatment !== 'incomplete',
  )
  return {
    name,
    timeS,
    tempC: thin.values.map((value, i) => {
      if (!Number.isNaN(value)) return toHundredth(value)
      return isInterpolated[i] === true ? joined(thin, i) : null
    }),
    isInterpolated,
  }
}

/** On the straight line between the readings on both sides; the one there is at an end; null with none. */
function joined(curve: { times: number[]; values: number[] }, at: number): number | null {
  const before = curve.values.findLastIndex((value, i) => i < at && !Number.isNaN(value))
  const after = curve.values.findIndex((value, i) => i > at && !Number.isNaN(value))
  const low = curve.values[before]
  const high = curve.values[after]
  if (low === undefined || high === undefined) {
    const only = low ?? high
    return only === undefined ? null : toHundredth(only)
  }
  const fromS = curve.times[before] ?? 0
  const toS = curve.times[after] ?? 0
  return toHundredth(straightBetween(fromS, low, toS, high, curve.times[at] ?? 0))
}

/**
 * The dose as it grew, at most about `points` of it; every reading counts. From the first gap that cannot be joined
 * on it is not known: nulls.
 */
export function pictureDose(filled: FilledSeries, model: DoseModel, points: number): PictureDose {
  const openS = filled.gaps.find((gap) => gap.treatment === 'incomplete')?.startS ?? Infinity
  const dose = createDoseAccumulator(model)
  const last = filled.timeS.length - 1
  const every = Math.max(1, Math.ceil(last / points))
  const line: PictureDose = { timesS: [], equivalentMin: [] }
  for (let i = 0; i <= last; i += 1) {
    const timeS = filled.timeS[i] ?? NaN
    const minutes = dose.add(timeS, filled.tempC[i] ?? NaN)
    if (i % every !== 0 && i !== last) continue
    line.timesS.push(toHundredth(timeS))
    line.equivalentMin.push(timeS > openS ? null : Number(minutes.toPrecision(5)))
  }
  return line
}
