import type { ProbeCheck } from '@/lib/science/dose-interval'

/** One row of `probe_checks`: what the probe said while the reference stood at a known temperature. */
export type CheckRow = {
  kind: 'ice' | 'boiling' | 'block'
  referenceTempC: number
  measuredTempC: number
  /** k = 2. */
  uncertaintyC: number
  checkedAtMs: number
  dueAtMs: number
}

/** A probe's correction by its checks, and what may be claimed of a corrected reading; null without checks. */
export type ProbeCorrection = {
  /** Adds to a reading, °C: straight between check points, the end point's outside them. */
  correctionC: (measuredTempC: number) => number
  check: ProbeCheck | null
}

/** Checks of one kind made within this of the newest belong to the same occasion (a block at 180 and at 230 °C). */
const occasionMs = 24 * 3600 * 1000
/** Two points closer than this say the same; the newer stands. */
const samePointC = 5

/**
 * The correction that holds at an instant (SCIENCE §1): the points of the newest occasion of each kind that was not
 * after it; linear in between. Beyond the checked span the end point's correction is kept and no tighter claim is
 * made than the class limit, which is the caller's to see by `lowTempC` and `highTempC`.
 */
export function probeCorrectionAt(checks: readonly CheckRow[], atMs: number): ProbeCorrection {
  const points = pointsAt(checks, atMs)
  const first = points[0]
  const last = points.at(-1)
  if (first === undefined || last === undefined) return { correctionC: () => 0, check: null }
  return {
    correctionC: (measuredTempC) => interpolate(points, measuredTempC),
    check: {
      uncertaintyC: Math.max(...points.map((point) => point.uncertaintyC)),
      lowTempC: first.measuredTempC,
      highTempC: last.measuredTempC,
      isExpired: points.some((point) => point.dueAtMs < atMs),
    },
  }
}

function pointsAt(checks: readonly CheckRow[], atMs: number): CheckRow[] {
  const known = checks
    .filter((check) => check.checkedAtMs <= atMs)
    .sort((a, b) => b.checkedAtMs - a.checkedAtMs || a.measuredTempC - b.measuredTempC)
  const points: CheckRow[] = []
  for (const check of known) {
    const newest = known.find((other) => other.kind === check.kind)
    const isOfNewest = newest !== undefined && newest.checkedAtMs - check.checkedAtMs <= occasionMs
    const isNew = points.every((point) => Math.abs(point.measuredTempC - check.measuredTempC) >= samePointC)
    if (isOfNewest && isNew) points.push(check)
  }
  return points.sort((a, b) => a.measuredTempC - b.measuredTempC)
}

function interpolate(points: readonly CheckRow[], measuredTempC: number): number {
  const after = points.findIndex((point) => point.measuredTempC >= measuredTempC)
  const high = points[after === -1 ? points.length - 1 : after]
  const low = points[Math.max(0, (after === -1 ? points.length : after) - 1)]
  if (high === undefined || low === undefined) return 0
  const atHigh = high.referenceTempC - high.measuredTempC
  const atLow = low.referenceTempC - low.measuredTempC
  const spanC = high.measuredTempC - low.measuredTempC
  if (after <= 0 || spanC === 0) return after === -1 ? atLow : atHigh
  return atLow + ((measuredTempC - low.measuredTempC) / spanC) * (atHigh - atLow)
}
