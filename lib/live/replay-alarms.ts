import type { AlarmState } from '@/lib/alarms/alarm-states'
import { stateAfterHand } from '@/lib/alarms/alarm-states'
import type { AlarmMove, AlarmStanding } from '@/lib/alarms/firing-alarms'
import { alarmKey } from '@/lib/alarms/firing-alarms'
import type { FiringSeries } from '@/lib/ingest/firing-readings'
import type { FiringFacts } from '@/lib/live/firing-facts'
import type { LiveFiring } from '@/lib/live/live-firing'
import { createLiveFiring } from '@/lib/live/live-firing'

/** A move of a replay; `isByHand` when somebody took note of the alarm. */
export type ReplayedMove = AlarmMove & { isByHand: boolean }

export type ReplayOptions = {
  /** How far apart the alarms look, ms. */
  stepMs: number
  /** How long after it came an alarm was taken note of, ms; null: never. */
  seenAfterMs: number | null
}

type Reading = { atMs: number; tempC: number; assignment: FiringSeries['assignments'][number] }

/**
 * The alarms that a firing would have had at the fireside, from its record: the same machines as live, looking every
 * `stepMs`, knowing at each moment only what was known then. What is on at its end is suppressed by design. Gateways
 * are taken as heard.
 */
export function replayAlarms(
  facts: FiringFacts,
  series: readonly FiringSeries[],
  { stepMs, seenAfterMs }: ReplayOptions,
): ReplayedMove[] {
  const readings = inTimeOrder(series)
  const endMs = facts.endedMs ?? readings.at(-1)?.atMs ?? facts.preheatMs
  const changes = changeInstants(facts)
  const live = createLiveFiring(factsAt(facts, facts.preheatMs), { hasStave: false })
  const table = createTable()
  let next = 0
  let changed = 0
  for (let atMs = facts.preheatMs; atMs <= endMs; atMs += stepMs) {
    const changedBefore = changed
    while (changed < changes.length && (changes[changed] ?? Infinity) <= atMs) changed += 1
    if (changed !== changedBefore) live.setFacts(factsAt(facts, atMs))
    for (; next < readings.length && (readings[next]?.atMs ?? Infinity) <= atMs; next += 1) {
      const reading = readings[next]
      if (reading !== undefined) live.put(reading.assignment, reading.atMs, reading.tempC, 0)
    }
    if (seenAfterMs !== null) seeAll(live, table, atMs, seenAfterMs)
    live.glance(atMs)
    for (const move of live.takeAlarmMoves()) table.add(move, false)
  }
  if (facts.endedMs !== null) table.end(facts.endedMs)
  return table.moves
}

function inTimeOrder(series: readonly FiringSeries[]): Reading[] {
  return series
    .flatMap(({ assignments, atMs, tempC }) => {
      const [assignment] = assignments
      if (assignment === undefined) return []
      return Array.from(atMs, (at, i): Reading => ({ atMs: at, tempC: tempC[i] ?? NaN, assignment }))
    })
    .sort((a, b) => a.atMs - b.atMs)
}

function changeInstants(facts: FiringFacts): number[] {
  const phases = [facts.bendMs, facts.toastMs, facts.restMs].filter((at): at is number => at !== null)
  return [...phases, ...facts.marks.map((mark) => mark.atMs)].sort((a, b) => a - b)
}

/** What was known of a firing at a moment. */
function factsAt(facts: FiringFacts, atMs: number): FiringFacts {
  const past = (instant: number | null) => (instant !== null && instant <= atMs ? instant : null)
  const [bendMs, toastMs, restMs] = [past(facts.bendMs), past(facts.toastMs), past(facts.restMs)]
  const state =
    restMs !== null ? 'resting' : toastMs !== null ? 'toasting' : bendMs !== null ? 'bending' : 'preheating'
  const marks = facts.marks.filter((mark) => mark.atMs <= atMs)
  return { ...facts, state, bendMs, toastMs, restMs, endedMs: null, marks }
}

/** How each alarm stands, as the table would have it. */
function createTable() {
  const moves: ReplayedMove[] = []
  const standings = new Map<string, AlarmStanding & { cameMs: number }>()
  const add = (move: AlarmMove, isByHand: boolean) => {
    moves.push({ ...move, isByHand })
    const before = standings.get(alarmKey(move))
    const hasCome = move.from === 'normal' || move.from === 'returned unacknowledged'
    const cameMs = hasCome ? move.atMs : (before?.cameMs ?? move.atMs)
    standings.set(alarmKey(move), {
      kind: move.kind,
      subject: move.subject,
      occurrenceId: move.occurrenceId,
      state: move.to,
      sinceMs: cameMs,
      words: move.words,
      shelvedUntilMs: null,
      cameMs,
    })
  }
  const moveOf = (
    standing: AlarmStanding,
    to: AlarmState,
    atMs: number,
    reason: string | null,
  ): AlarmMove => ({
    kind: standing.kind,
    subject: standing.subject,
    occurrenceId: standing.occurrenceId,
    from: standing.state,
    to,
    atMs,
    words: standing.words,
    value: null,
    limit: null,
    reason,
  })
  return {
    moves,
    add,
    open: () => [...standings.values()].filter((standing) => standing.state !== 'normal'),
    see: (standing: AlarmStanding, atMs: number) => {
      const to = stateAfterHand(standing.state, 'acknowledge')
      if (to !== null) add(moveOf(standing, to, atMs, null), true)
    },
    end: (atMs: number) => {
      for (const standing of [...standings.values()]) {
        if (standing.state === 'normal' || standing.state === 'suppressed') continue
        add(moveOf(standing, 'suppressed', atMs, 'The firing has ended.'), false)
      }
    },
  }
}

function seeAll(
  live: LiveFiring,
  table: ReturnType<typeof createTable>,
  atMs: number,
  afterMs: number,
): void {
  const due = table
    .open()
    .filter(
      (standing) =>
        standing.kind !== 'reminder' &&
        stateAfterHand(standing.state, 'acknowledge') !== null &&
        atMs - standing.cameMs >= afterMs,
    )
  if (due.length === 0) return
  for (const standing of due) table.see(standing, atMs)
  live.restoreAlarms(table.open())
}
