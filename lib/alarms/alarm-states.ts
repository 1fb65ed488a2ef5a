/** The states of an alarm after ISA-18.2; out of service is not among them, since nothing here is taken out. */
export const alarmStates = [
  'normal',
  'unacknowledged',
  'acknowledged',
  'returned unacknowledged',
  'shelved',
  'suppressed',
] as const
export type AlarmState = (typeof alarmStates)[number]

/**
 * The allowed moves (mirrored by alarm_moves in the database). Suppressed is ISA's "suppressed by design": by a
 * marked turn-over, a lost gateway that says the same, or the firing's end. From unacknowledged straight to normal go
 * reminders only.
 */
export const alarmMoves: Record<AlarmState, readonly AlarmState[]> = {
  normal: ['unacknowledged', 'suppressed'],
  unacknowledged: ['acknowledged', 'returned unacknowledged', 'shelved', 'suppressed', 'normal'],
  acknowledged: ['normal', 'shelved', 'suppressed'],
  'returned unacknowledged': ['normal', 'unacknowledged', 'shelved', 'suppressed'],
  shelved: ['unacknowledged', 'normal', 'suppressed'],
  suppressed: ['unacknowledged', 'normal'],
}

export function canMoveAlarm(from: AlarmState, to: AlarmState): boolean {
  return alarmMoves[from].includes(to)
}

/** What an alarm's own condition is at a moment, after its delays. */
export type AlarmSight = {
  isActive: boolean
  /** Active still, but well inside its limit again: only the off-delay holds it. */
  isEnding: boolean
  isSuppressed: boolean
  atMs: number
}

/**
 * Where an alarm goes by itself; its own state when it stays. What hands do (seen, shelved, taken back) comes through
 * `stateAfterHand`.
 *
 * @param needsSeen false: it goes by itself when its condition does (reminders)
 */
export function nextAlarmState(
  state: AlarmState,
  sight: AlarmSight,
  needsSeen: boolean,
  shelvedUntilMs: number | null,
): AlarmState {
  const { isActive, isEnding, isSuppressed } = sight
  switch (state) {
    case 'normal':
      if (!isActive) return state
      return isSuppressed ? 'suppressed' : 'unacknowledged'
    case 'unacknowledged':
      if (isSuppressed) return 'suppressed'
      if (isActive) return state
      return needsSeen ? 'returned unacknowledged' : 'normal'
    case 'acknowledged':
      if (isSuppressed) return 'suppressed'
      return isActive ? state : 'normal'
    case 'returned unacknowledged':
      if (isSuppressed) return 'suppressed'
      return isActive ? 'unacknowledged' : state
    case 'shelved':
      if (shelvedUntilMs !== null && sight.atMs < shelvedUntilMs) return state
      return isActive && !isEnding ? 'unacknowledged' : 'normal'
    case 'suppressed':
      if (!isActive) return 'normal'
      // What is over as its suppression ends does not come up any more.
      return isSuppressed || isEnding ? state : 'unacknowledged'
  }
}

/** What hands do to an alarm. */
export const alarmHands = ['acknowledge', 'shelve', 'unshelve'] as const
export type AlarmHand = (typeof alarmHands)[number]

/** Where a hand brings an alarm; null when it cannot be done in its state. */
export function stateAfterHand(state: AlarmState, hand: AlarmHand): AlarmState | null {
  if (hand === 'acknowledge') {
    if (state === 'unacknowledged') return 'acknowledged'
    return state === 'returned unacknowledged' ? 'normal' : null
  }
  if (hand === 'unshelve') return state === 'shelved' ? 'unacknowledged' : null
  return canMoveAlarm(state, 'shelved') ? 'shelved' : null
}

/** On the screen now: neither normal nor put away. */
export function isSounding(state: AlarmState): boolean {
  return state === 'unacknowledged' || state === 'acknowledged' || state === 'returned unacknowledged'
}
/** Somebody has still to take note of it. */
export function isUnseen(state: AlarmState): boolean {
  return state === 'unacknowledged' || state === 'returned unacknowledged'
}
