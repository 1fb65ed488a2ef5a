import { requireFinite, requirePositive } from './domain'
import { timeWeighted8hPpm, timeWeightedWbgtC } from './exposure'

/**
 * A day's readings of a meter, by hand or from its file, made into means. A reading stands until the next one and no
 * longer than it may (site data): time that nothing covers is said, and never filled in. A record and a reminder.
 */

export type ExposurePoint = { atMs: number; value: number }

/** A stretch of time at one value, [fromMs, untilMs). */
export type HeldSegment = { fromMs: number; untilMs: number; value: number }

export type HoldRule = {
  /** A reading stands no longer than this, min. */
  holdsMin: number
  /** Nothing stands beyond this instant: the day's end, or now. */
  untilMs: number
}

const MS_PER_HOUR = 3_600_000

/**
 * Each reading until the next, until it has stood as long as it may, or until the end; in order of time. Readings at or
 * after the end have no time to stand and are left out.
 *
 * @throws RangeError for a time or value that is not finite, or a holding time not above 0
 */
export function heldSegments(points: readonly ExposurePoint[], rule: HoldRule): HeldSegment[] {
  const holdsMs = requirePositive('holdsMin', rule.holdsMin) * 60_000
  requireFinite('untilMs', rule.untilMs)
  points.forEach((point, i) => {
    requireFinite(`points[${i}].atMs`, point.atMs)
    requireFinite(`points[${i}].value`, point.value)
  })
  const inOrder = [...points].sort((a, b) => a.atMs - b.atMs)
  return inOrder.flatMap(({ atMs, value }, i) => {
    const nextMs = inOrder[i + 1]?.atMs ?? Infinity
    const untilMs = Math.min(nextMs, atMs + holdsMs, rule.untilMs)
    return untilMs > atMs ? [{ fromMs: atMs, untilMs, value }] : []
  })
}

/** Time that the segments cover, h. */
export function coveredHours(segments: readonly HeldSegment[]): number {
  return segments.reduce((sum, { fromMs, untilMs }) => sum + (untilMs - fromMs), 0) / MS_PER_HOUR
}

/**
 * Eight-hour mean of the segments, ppm, by {@link timeWeighted8hPpm}: time that nothing covers counts as none, so that
 * the mean is too low by what is missing. Null without segments.
 *
 * @throws RangeError for a concentration below 0
 */
export function dayMean8hPpm(segments: readonly HeldSegment[]): number | null {
  if (segments.length === 0) return null
  return timeWeighted8hPpm(
    segments.map(({ fromMs, untilMs, value }) => ({ ppm: value, hours: (untilMs - fromMs) / MS_PER_HOUR })),
  )
}

/**
 * The hottest stretch: the largest time-weighted mean over any window of so many minutes, °C WBGT, taken over the time
 * in it that readings cover (ISO 7243 averages steady work over 60 min). Windows are those that end where a segment
 * ends; the mean is linear between, so that none of the others that are wholly covered is hotter. Null without segments.
 *
 * @param windowMin length of the window, min
 * @throws RangeError for a window not above 0
 */
export function hottestMeanC(
  segments: readonly HeldSegment[],
  windowMin: number,
): { meanC: number; untilMs: number } | null {
  const windowMs = requirePositive('windowMin', windowMin) * 60_000
  let hottest: { meanC: number; untilMs: number } | null = null
  // The mean over a sliding window is linear in its position between the ends of segments on either side of it.
  const ends = segments.flatMap(({ fromMs, untilMs }) => [untilMs, fromMs + windowMs])
  for (const untilMs of ends) {
    const meanC = meanWithin(segments, untilMs - windowMs, untilMs)
    if (meanC !== null && (hottest === null || meanC > hottest.meanC)) hottest = { meanC, untilMs }
  }
  return hottest
}

/** Time-weighted mean of what the segments cover in [fromMs, untilMs), °C; null when they cover nothing of it. */
export function meanWithin(segments: readonly HeldSegment[], fromMs: number, untilMs: number): number | null {
  const parts = segments.flatMap((segment) => {
    const ms = Math.min(segment.untilMs, untilMs) - Math.max(segment.fromMs, fromMs)
    return ms > 0 ? [{ wbgtC: segment.value, minutes: ms / 60_000 }] : []
  })
  return parts.length === 0 ? null : timeWeightedWbgtC(parts)
}

/** A minute of a meter that writes more often: its mean, its peak, and the first instant of it. */
export type FoldedPoint = ExposurePoint & { peak: number }

/** Readings closer than a minute made one a minute (whole minutes of the clock); others stay as they are. */
export function foldToMinutes(points: readonly ExposurePoint[]): FoldedPoint[] {
  const minutes = new Map<number, ExposurePoint[]>()
  for (const point of points) {
    const minute = Math.floor(point.atMs / 60_000)
    minutes.set(minute, [...(minutes.get(minute) ?? []), point])
  }
  return [...minutes.values()]
    .map((group) => ({
      atMs: Math.min(...group.map((point) => point.atMs)),
      value: group.reduce((sum, point) => sum + point.value, 0) / group.length,
      peak: Math.max(...group.map((point) => point.value)),
    }))
    .sort((a, b) => a.atMs - b.atMs)
}
