import type { DraggedPoint } from './pair-types'

export const SNAP_C = 1
export const SNAP_S = 30

/** The place on the plot where handles live, px, with the axes it shows. */
export type HandleFrame = {
  left: number
  top: number
  width: number
  height: number
  xMaxS: number
  lowC: number
  highC: number
}

/**
 * A plan point where the pointer is, snapped to 1 °C and half a minute and kept between its neighbours. The
 * first point stays at time 0.
 */
export function snapDrag(
  frame: HandleFrame,
  pointIndex: number,
  timesS: ArrayLike<number>,
  at: { xPx: number; yPx: number },
): DraggedPoint {
  const timeS = (at.xPx / frame.width) * frame.xMaxS
  const tempC = frame.highC - (at.yPx / frame.height) * (frame.highC - frame.lowC)
  return snapPoint(pointIndex, timesS, timeS, tempC)
}

/** Snaps a wished time and temperature and keeps the order of the points. */
export function snapPoint(
  pointIndex: number,
  timesS: ArrayLike<number>,
  timeS: number,
  tempC: number,
): DraggedPoint {
  const earliestS = pointIndex === 0 ? 0 : (timesS[pointIndex - 1] ?? 0) + SNAP_S
  const latestS = pointIndex === 0 ? 0 : Math.max((timesS[pointIndex + 1] ?? Infinity) - SNAP_S, earliestS)
  const snappedS = Math.round(timeS / SNAP_S) * SNAP_S
  return {
    pointIndex,
    timeS: Math.min(Math.max(snappedS, earliestS), latestS),
    tempC: Math.min(Math.max(Math.round(tempC / SNAP_C) * SNAP_C, 0), 400),
  }
}
