import type { FiringState } from '@/lib/live/events'
import { probeRoles } from '@/lib/live/events'
import type { FiringFacts } from '@/lib/live/firing-facts'
import type { RoleCurve } from '@/lib/live/role-curve'

export type Role = (typeof probeRoles)[number]
export type Signal = FiringState['signals'][number]
/** The flag of the newest reading of a role, with its instant. */
export type NewestFlag = { atMs: number; flag: number }

/** Marked stale by the tick after this: within 3 s of the last reading. */
export const staleAfterMs = 2_750

const causes = [
  'out of the thermocouple’s range',
  'open circuit',
  'short circuit',
  'the gateway says it is faulty',
]

/** One signal a role that the firing has had a probe for, lead first. */
export function liveSignals(
  facts: FiringFacts,
  curves: Record<Role, RoleCurve>,
  flags: Record<Role, NewestFlag>,
  atMs: number,
): Signal[] {
  return probeRoles.flatMap((role) => {
    const probe = facts.assignments.findLast((one) => one.role === role && one.fromMs <= atMs)
    return probe === undefined ? [] : [signalOf(role, probe.probeName, curves[role], flags[role], atMs)]
  })
}

function signalOf(role: Role, probeName: string, curve: RoleCurve, flag: NewestFlag, atMs: number): Signal {
  if (curve.length === 0) {
    const cause = 'nothing received yet'
    return { role, probeName, condition: 'no reading', cause, lastAtMs: null, tempC: null }
  }
  const lastAtMs = curve.atMs(curve.length - 1)
  const last = curve.tempC(curve.length - 1)
  if (Number.isNaN(last)) {
    const cause = causes[flag.atMs === lastAtMs ? flag.flag : 0] ?? 'unknown'
    return { role, probeName, condition: 'no reading', cause, lastAtMs, tempC: null }
  }
  const tempC = Math.round(last * 100) / 100
  if (atMs - lastAtMs > staleAfterMs) {
    return { role, probeName, condition: 'stale', cause: 'nothing more received', lastAtMs, tempC }
  }
  return { role, probeName, condition: 'live', cause: null, lastAtMs, tempC }
}
