import type { RoleCurve } from '@/lib/live/role-curve'
import type { DoseAccumulator, DoseModel } from '@/lib/science/heat-dose'
import { createDoseAccumulator } from '@/lib/science/heat-dose'

export type DoseWindow = { toastMs: number; restMs: number | null }

/** The lead probe's dose from toast start, grown reading by reading. */
export type RunningDose = {
  /** Takes in what the curve has grown by; answers minutes at the reference temperature. */
  advance: (curve: RoleCurve) => number
  /** A reading came in before this index, or changed: what was counted from there on is counted again. */
  touch: (index: number) => void
  setWindow: (window: DoseWindow | null) => void
}

/**
 * Straight between readings, over silences too, from toast start to the last reading or rest start: the same sum as
 * the score's over the same readings (`fillGaps`), so a live dose and a score agree to rounding, and two runs over
 * the same readings agree bit for bit. At either edge the reading outside it counts when no gap lies between.
 *
 * @param gapMsOf the silence from which a curve has a gap, ms; asked at the edges only
 */
export function createRunningDose(model: DoseModel, gapMsOf: (curve: RoleCurve) => number): RunningDose {
  let window: DoseWindow | null = null
  let dose: DoseAccumulator = createDoseAccumulator(model)
  let next = 0
  let hasStarted = false
  let isOver = false
  let lastMs = NaN
  let lastC = NaN

  const restart = () => {
    dose = createDoseAccumulator(model)
    next = 0
    hasStarted = false
    isOver = false
    lastMs = NaN
    lastC = NaN
  }
  const edgeTempC = (
    curve: RoleCurve,
    edgeMs: number,
    [innerMs, innerC]: [number, number],
    [outerMs, outerC]: [number, number],
  ) =>
    Math.abs(innerMs - outerMs) <= gapMsOf(curve)
      ? outerC + ((innerC - outerC) * (edgeMs - outerMs)) / (innerMs - outerMs)
      : innerC
  const take = (curve: RoleCurve, atMs: number, tempC: number, { toastMs, restMs }: DoseWindow) => {
    if (atMs < toastMs) {
      lastMs = atMs
      lastC = tempC
      return
    }
    if (restMs !== null && atMs > restMs) {
      isOver = true
      if (hasStarted && lastMs < restMs) {
        dose.add((restMs - toastMs) / 1000, edgeTempC(curve, restMs, [lastMs, lastC], [atMs, tempC]))
      }
      return
    }
    if (!hasStarted && atMs > toastMs) dose.add(0, edgeTempC(curve, toastMs, [atMs, tempC], [lastMs, lastC]))
    hasStarted = true
    dose.add((atMs - toastMs) / 1000, tempC)
    lastMs = atMs
    lastC = tempC
  }
  return {
    advance: (curve) => {
      if (window === null) return 0
      for (; next < curve.length && !isOver; next += 1) {
        const tempC = curve.tempC(next)
        if (!Number.isNaN(tempC)) take(curve, curve.atMs(next), tempC, window)
      }
      return dose.minutes
    },
    touch: (index) => {
      if (index < next) restart()
    },
    setWindow: (wanted) => {
      if (wanted?.toastMs === window?.toastMs && wanted?.restMs === window?.restMs) return
      window = wanted
      restart()
    },
  }
}
