/** What an alarm sees at a moment: beyond its limit, well inside it (by the deadband), or between the two. */
export type AlarmView = 'beyond' | 'between' | 'inside'

/** Seconds that it must be beyond before it comes, and inside before it goes (TARGETS: alarms never chatter). */
export type AlarmDelays = { onDelayS: number; offDelayS: number }

export type AlarmDelay = {
  /** Tells what is seen now; answers since when it is on, ms, or null. Moments never fall. */
  see: (view: AlarmView, atMs: number) => number | null
  readonly sinceMs: number | null
  /** On, but inside its limit again: about to end. */
  readonly isEnding: boolean
}

/** @param onSinceMs since when it was on before a restart; left out: it is off */
export function createAlarmDelay(delays: AlarmDelays, onSinceMs: number | null = null): AlarmDelay {
  let sinceMs = onSinceMs
  let beyondFromMs: number | null = null
  let insideFromMs: number | null = null
  return {
    see: (view, atMs) => {
      // Between keeps an alarm on but never starts one, and never counts towards its end.
      beyondFromMs = view === 'beyond' ? (beyondFromMs ?? atMs) : null
      insideFromMs = view === 'inside' ? (insideFromMs ?? atMs) : null
      if (sinceMs === null && beyondFromMs !== null && atMs - beyondFromMs >= delays.onDelayS * 1000) {
        sinceMs = beyondFromMs
      } else if (
        sinceMs !== null &&
        insideFromMs !== null &&
        atMs - insideFromMs >= delays.offDelayS * 1000
      ) {
        sinceMs = null
      }
      return sinceMs
    },
    get sinceMs() {
      return sinceMs
    },
    get isEnding() {
      return sinceMs !== null && insideFromMs !== null
    },
  }
}

/** A value against an upper limit; `deadband` below it is still between. */
export function viewAbove(value: number | null, limit: number, deadband: number): AlarmView {
  if (value === null) return 'between'
  if (value > limit) return 'beyond'
  return value < limit - deadband ? 'inside' : 'between'
}
