import { formatAge } from '@/lib/format'
import type { FiringState } from '@/lib/live/events'

/** A state older than this is not now: the hub sends one a second. */
export const CUT_AFTER_MS = 3_000
/** A reading older than this is no reading any more, as the alarm says from then on. */
export const NO_READING_AFTER_MS = 8_000

type Role = FiringState['signals'][number]['role']
/** The part of a state that the room's rows have as well. */
type Known = Pick<FiringState, 'atMs' | 'signals'>

/**
 * What may be shown of a probe. `live` is now; `old` is the last value with its age, drawn as such; `none` is NO
 * READING; `cut` is what was known when this screen lost the server; `waiting` is before the first word from it.
 */
export type ProbeReading =
  | { kind: 'live'; tempC: number }
  | { kind: 'old'; tempC: number; ageS: number }
  | { kind: 'none'; cause: string; ageS: number | null }
  | { kind: 'cut'; tempC: number | null; atMs: number }
  | { kind: 'waiting' }
  | { kind: 'absent' }

/** True when the newest state is too old to be called now. */
export function isCut(state: Pick<FiringState, 'atMs'> | null, nowMs: number): boolean {
  return state !== null && nowMs - state.atMs > CUT_AFTER_MS
}

export function readProbe(state: Known | null, role: Role, nowMs: number): ProbeReading {
  if (state === null) return { kind: 'waiting' }
  const signal = state.signals.find((one) => one.role === role)
  if (signal === undefined) return { kind: 'absent' }
  if (isCut(state, nowMs)) {
    const atMs = signal.lastAtMs ?? state.atMs
    return { kind: 'cut', tempC: signal.condition === 'no reading' ? null : signal.tempC, atMs }
  }
  const ageMs = signal.lastAtMs === null ? null : nowMs - signal.lastAtMs
  const ageS = ageMs === null ? null : Math.max(0, ageMs / 1000)
  if (signal.condition === 'no reading' || signal.tempC === null) {
    return { kind: 'none', cause: signal.cause ?? 'no reading', ageS }
  }
  if (signal.condition === 'live') return { kind: 'live', tempC: signal.tempC }
  if (ageS === null || ageS * 1000 >= NO_READING_AFTER_MS) {
    return { kind: 'none', cause: signal.cause ?? 'nothing more received', ageS }
  }
  return { kind: 'old', tempC: signal.tempC, ageS }
}

/** Beside the number, in place of "3 above plan": why it is not now. Null when it is. */
export function readingNote(reading: ProbeReading): string | null {
  if (reading.kind === 'old') return `${formatAge(reading.ageS)} old`
  if (reading.kind === 'none') {
    return reading.ageS === null ? reading.cause : `${reading.cause}, ${formatAge(reading.ageS)}`
  }
  return null
}
