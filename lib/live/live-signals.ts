import type { CheckedCurve } from '@/lib/live/checked-curve'
import type { FiringState } from '@/lib/live/events'
import { probeRoles } from '@/lib/live/events'
import type { FiringFacts } from '@/lib/live/firing-facts'
import { causeOf } from '@/lib/live/signal-words'
import { troubleCodes } from '@/lib/science/signal-trouble'

export type Role = (typeof probeRoles)[number]
export type Signal = FiringState['signals'][number]
/** The flag of the newest reading of a role, with its instant. */
export type NewestFlag = { atMs: number; flag: number }

/** Marked stale by the tick after this: within 3 s of the last reading. */
export const staleAfterMs = 2_750
/** A jump that is over sooner is passed over: the reading before it still holds. */
const passedOverMs = 1_000

/** One signal a role that the firing has had a probe for, lead first. */
export function liveSignals(
  facts: Pick<FiringFacts, 'assignments'>,
  curves: Record<Role, CheckedCurve>,
  flags: Record<Role, NewestFlag>,
  atMs: number,
): Signal[] {
  return probeRoles.flatMap((role) => {
    const probe = facts.assignments.findLast((one) => one.role === role && one.fromMs <= atMs)
    return probe === undefined ? [] : [signalOf(role, probe.probeName, curves[role], flags[role], atMs)]
  })
}

function signalOf(
  role: Role,
  probeName: string,
  curve: CheckedCurve,
  flag: NewestFlag,
  atMs: number,
): Signal {
  if (curve.length === 0) {
    const cause = 'nothing received yet'
    return { role, probeName, condition: 'no reading', cause, lastAtMs: null, tempC: null }
  }
  const newest = lastThatHolds(curve, atMs)
  const lastAtMs = curve.atMs(newest)
  const last = curve.tempC(newest)
  if (Number.isNaN(last)) {
    const cause = causeOf(curve.troubleAt(newest), flag.atMs === lastAtMs ? flag.flag : 0)
    return { role, probeName, condition: 'no reading', cause, lastAtMs: lastNumberAtMs(curve), tempC: null }
  }
  const tempC = Math.round(last * 100) / 100
  if (atMs - lastAtMs > staleAfterMs) {
    return { role, probeName, condition: 'stale', cause: 'nothing more received', lastAtMs, tempC }
  }
  return { role, probeName, condition: 'live', cause: null, lastAtMs, tempC }
}

/** When there was a reading last; null when there never was one. */
function lastNumberAtMs(curve: CheckedCurve): number | null {
  let i = curve.length - 1
  while (i >= 0 && Number.isNaN(curve.tempC(i))) i -= 1
  return i < 0 ? null : curve.atMs(i)
}

/** The newest reading; behind a jump of less than a second the one before it. */
function lastThatHolds(curve: CheckedCurve, atMs: number): number {
  const newest = curve.length - 1
  for (let i = newest; i >= 0 && curve.atMs(i) >= atMs - passedOverMs; i -= 1) {
    if (curve.troubleAt(i) === troubleCodes.none) return Number.isNaN(curve.tempC(i)) ? newest : i
  }
  return newest
}
