import { randomUUID } from 'node:crypto'
import type { AlarmDelay, AlarmDelays, AlarmView } from '@/lib/alarms/alarm-delay'
import { createAlarmDelay } from '@/lib/alarms/alarm-delay'
import type { AlarmKind, AlarmLevel } from '@/lib/alarms/alarm-kinds'
import { alarmCatalog } from '@/lib/alarms/alarm-kinds'
import type { AlarmState } from '@/lib/alarms/alarm-states'
import { isSounding, isUnseen, nextAlarmState } from '@/lib/alarms/alarm-states'

/** What is to be said of one alarm at a moment. `subject` tells alarms of one kind apart: a cue, a gateway. */
export type AlarmCondition = {
  kind: AlarmKind
  subject: string
  view: AlarmView
  /** By design: a marked turn-over, a lost gateway. */
  suppressedBy: string | null
  delays: AlarmDelays
  words: string
  /** Once it is inside its limit again. */
  endingWords: string
  value: number | null
  limit: number | null
}

/** How an alarm stands, as it is kept over a restart. */
export type AlarmStanding = {
  kind: AlarmKind
  subject: string
  occurrenceId: string
  state: AlarmState
  sinceMs: number
  words: string
  shelvedUntilMs: number | null
}

/** A move that an alarm made by itself, to be written down. */
export type AlarmMove = {
  kind: AlarmKind
  subject: string
  /** The same from when the alarm came until it is normal again. */
  occurrenceId: string
  from: AlarmState
  to: AlarmState
  atMs: number
  words: string
  value: number | null
  limit: number | null
  reason: string | null
}

export type PresentAlarm = {
  id: string
  kind: AlarmKind
  words: string
  level: AlarmLevel
  sinceMs: number
  state: AlarmState
  /** Somebody has still to take note of it. */
  mayAcknowledge: boolean
  shelvedUntilMs: number | null
}

/** The alarms of one firing. Pure but for the ids that it gives. */
export type FiringAlarms = {
  /** Once a tick; an alarm that is not among the conditions is inside its limit. */
  see: (conditions: readonly AlarmCondition[], atMs: number) => void
  /** What is on the screen or shelved: the gravest first, unseen before seen, those that are over behind. */
  present: () => PresentAlarm[]
  /** The moves since the last call, in their order. */
  takeMoves: () => AlarmMove[]
  /** As the table has them: after a restart, and after a hand's move. Those that `isPending` stay as they are. */
  restore: (standings: readonly AlarmStanding[], isPending?: (key: string) => boolean) => void
}

type Machine = {
  kind: AlarmKind
  subject: string
  delay: AlarmDelay
  delays: AlarmDelays
  view: AlarmView
  state: AlarmState
  occurrenceId: string
  sinceMs: number
  words: string
  shelvedUntilMs: number | null
}

export function alarmKey({ kind, subject }: Pick<AlarmStanding, 'kind' | 'subject'>): string {
  return `${kind}/${subject}`
}

/** While it is not normal, its condition is taken to hold after a restart until it is seen to be over. */
function isOn(state: AlarmState): boolean {
  return state !== 'normal' && state !== 'returned unacknowledged'
}

export function createFiringAlarms(): FiringAlarms {
  const machines = new Map<string, Machine>()
  /** Standings whose condition, and so whose delays, has not been seen yet. */
  const restored = new Map<string, AlarmStanding>()
  let moves: AlarmMove[] = []

  const machineOf = (condition: AlarmCondition): Machine | null => {
    const key = alarmKey(condition)
    const known = machines.get(key)
    if (known !== undefined) return known
    const standing = restored.get(key)
    restored.delete(key)
    // An alarm that has never been needed costs nothing.
    if (standing === undefined && condition.view === 'inside') return null
    const machine: Machine = {
      kind: condition.kind,
      subject: condition.subject,
      delays: condition.delays,
      view: condition.view,
      delay: createAlarmDelay(
        condition.delays,
        standing !== undefined && isOn(standing.state) ? standing.sinceMs : null,
      ),
      state: standing?.state ?? 'normal',
      occurrenceId: standing?.occurrenceId ?? '',
      sinceMs: standing?.sinceMs ?? 0,
      words: standing?.words ?? '',
      shelvedUntilMs: standing?.shelvedUntilMs ?? null,
    }
    machines.set(key, machine)
    return machine
  }

  const move = (machine: Machine, to: AlarmState, condition: AlarmCondition, atMs: number) => {
    const from = machine.state
    if (from === 'normal') machine.occurrenceId = randomUUID()
    if (from === 'normal' || from === 'returned unacknowledged') {
      machine.sinceMs = machine.delay.sinceMs ?? atMs
    }
    machine.state = to
    if (to !== 'shelved') machine.shelvedUntilMs = null
    moves.push({
      kind: machine.kind,
      subject: machine.subject,
      occurrenceId: machine.occurrenceId,
      from,
      to,
      atMs,
      words: machine.words,
      value: condition.value,
      limit: condition.limit,
      reason: to === 'suppressed' ? condition.suppressedBy : null,
    })
  }

  const seeOne = (condition: AlarmCondition, atMs: number) => {
    const machine = machineOf(condition)
    if (machine === null) return
    machine.view = condition.view
    const isActive = machine.delay.see(condition.view, atMs) !== null
    const isOver = !isActive || machine.delay.isEnding
    const isSaid = machine.state !== 'normal' || isActive
    if (isSaid) machine.words = isOver ? condition.endingWords : condition.words
    const isSuppressed = condition.suppressedBy !== null
    const sight = { isActive, isEnding: machine.delay.isEnding, isSuppressed, atMs }
    const next = nextAlarmState(
      machine.state,
      sight,
      alarmCatalog[machine.kind].needsSeen,
      machine.shelvedUntilMs,
    )
    if (next !== machine.state) move(machine, next, condition, atMs)
    if (machine.state === 'normal' && machine.delay.sinceMs === null && condition.view === 'inside') {
      machines.delete(alarmKey(machine))
    }
  }

  return {
    see: (conditions, atMs) => {
      const seen = new Set(conditions.map(alarmKey))
      for (const condition of conditions) seeOne(condition, atMs)
      for (const [key, machine] of machines) if (!seen.has(key)) seeOne(insideOf(machine), atMs)
      for (const [key, standing] of restored) if (!seen.has(key)) seeOne(insideOf(standing), atMs)
    },
    present: () =>
      [...machines.values(), ...restored.values()]
        .filter((machine) => isSounding(machine.state) || machine.state === 'shelved')
        .map(toPresent)
        .sort(byGravity),
    takeMoves: () => {
      const taken = moves
      moves = []
      return taken
    },
    restore: (standings, isPending = () => false) => {
      const stored = new Map(standings.map((standing) => [alarmKey(standing), standing]))
      for (const [key, machine] of machines) {
        if (isPending(key)) continue
        const standing = stored.get(key)
        machine.state = standing?.state ?? 'normal'
        if (standing === undefined) continue
        // On by the table, and nothing seen here speaks against it: it holds until it is seen to be over.
        if (isOn(standing.state) && machine.delay.sinceMs === null && machine.view !== 'inside') {
          machine.delay = createAlarmDelay(machine.delays, standing.sinceMs)
        }
        machine.occurrenceId = standing.occurrenceId
        machine.sinceMs = standing.sinceMs
        machine.shelvedUntilMs = standing.shelvedUntilMs
      }
      restored.clear()
      for (const [key, standing] of stored) {
        if (standing.state !== 'normal' && !machines.has(key)) restored.set(key, standing)
      }
    },
  }
}

/** A condition that is no longer spoken of: what it was about is over. */
function insideOf(one: Pick<Machine, 'kind' | 'subject' | 'words'>): AlarmCondition {
  return {
    kind: one.kind,
    subject: one.subject,
    view: 'inside',
    suppressedBy: null,
    delays: { onDelayS: 0, offDelayS: 0 },
    words: one.words,
    endingWords: one.words,
    value: null,
    limit: null,
  }
}

function toPresent(machine: AlarmStanding): PresentAlarm {
  return {
    id: machine.occurrenceId,
    kind: machine.kind,
    words: machine.words,
    level: alarmCatalog[machine.kind].level,
    sinceMs: machine.sinceMs,
    state: machine.state,
    mayAcknowledge: isUnseen(machine.state),
    shelvedUntilMs: machine.shelvedUntilMs,
  }
}

function byGravity(a: PresentAlarm, b: PresentAlarm): number {
  const shelved = Number(a.state === 'shelved') - Number(b.state === 'shelved')
  const over = Number(a.state === 'returned unacknowledged') - Number(b.state === 'returned unacknowledged')
  const priority = alarmCatalog[a.kind].priority - alarmCatalog[b.kind].priority
  const unseen = Number(b.mayAcknowledge) - Number(a.mayAcknowledge)
  return shelved || over || priority || unseen || a.sinceMs - b.sinceMs
}
