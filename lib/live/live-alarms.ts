import type { Alarm } from '@/lib/live/alarm'
import { createAlarm, viewAbove } from '@/lib/live/alarm'
import type { FiringState } from '@/lib/live/events'
import type { FiringFacts } from '@/lib/live/firing-facts'
import type { Signal } from '@/lib/live/live-signals'

/** TARGETS: on-delay 5 s, off-delay 15 s, deadband 4 °C. */
const offDelayS = 15
const noReadingDelayS = 5
const deadbandC = 4
/** Of the climb maximum, since 4 °C/min would be most of it. */
const climbDeadbandShare = 0.2

export type AlarmInput = {
  facts: FiringFacts
  lead: Signal | undefined
  /** Climb over the rule's window, °C/min; null when it is not known. */
  windowClimbCPerMin: number | null
  atMs: number
}

export type LiveAlarms = { see: (input: AlarmInput) => FiringState['alarm'] }

/** The few alarms of one firing; the gravest that is on is shown. */
export function createLiveAlarms(facts: FiringFacts): LiveAlarms {
  const { limits } = facts.rules
  const wood = createAlarm({ onDelayS: limits.woodMaxHeldS, offDelayS })
  // The climb is already taken over the whole window, so it needs no further delay of its own.
  const climb = createAlarm({ onDelayS: 0, offDelayS })
  const noReading = createAlarm({ onDelayS: noReadingDelayS, offDelayS })
  return {
    see: (input) => {
      seeWood(wood, input)
      seeClimb(climb, input)
      seeNoReading(noReading, input)
      return (
        shown(wood, 'red', woodWords(wood, input)) ??
        shown(noReading, 'amber', noReadingWords(noReading, input)) ??
        shown(climb, 'amber', climbWords(climb, input))
      )
    },
  }
}

function shown(alarm: Alarm, level: 'amber' | 'red', words: string): FiringState['alarm'] {
  return alarm.sinceMs === null ? null : { words, level, sinceMs: alarm.sinceMs }
}

function isOverFire(facts: FiringFacts): boolean {
  return facts.state === 'bending' || facts.state === 'toasting' || facts.state === 'resting'
}

function woodLimitC(facts: FiringFacts): number {
  return facts.state === 'bending' ? facts.content.bend.woodLimitC : facts.content.limits.woodMaximumC
}

function liveTempC(lead: Signal | undefined): number | null {
  return lead?.condition === 'live' ? lead.tempC : null
}

function seeWood(alarm: Alarm, { facts, lead, atMs }: AlarmInput): void {
  const view = isOverFire(facts) ? viewAbove(liveTempC(lead), woodLimitC(facts), deadbandC) : 'inside'
  alarm.see(view, atMs)
}

function seeClimb(alarm: Alarm, { facts, windowClimbCPerMin, atMs }: AlarmInput): void {
  const limit = facts.content.limits.climbMaximumCPerMin
  const view =
    facts.state === 'toasting' ? viewAbove(windowClimbCPerMin, limit, limit * climbDeadbandShare) : 'inside'
  alarm.see(view, atMs)
}

/** A turn-over that was marked silences it for the rule's time; the gap still counts. */
function seeNoReading(alarm: Alarm, { facts, lead, atMs }: AlarmInput): void {
  const silentMs = facts.rules.noReadingSilenceS * 1000
  const isSilenced = facts.marks.some(
    (mark) => mark.kind === 'turn over' && mark.atMs <= atMs && atMs - mark.atMs < silentMs,
  )
  const isMissing = isOverFire(facts) && lead?.condition !== 'live'
  alarm.see(isMissing && !isSilenced ? 'beyond' : 'inside', atMs)
}

function woodWords(alarm: Alarm, { facts }: AlarmInput): string {
  const depth = facts.content.leadPlace.depthMm
  const where = depth === 0 ? 'The face' : `Wood at ${depth} mm`
  if (alarm.isEnding) return `${where} is below ${woodLimitC(facts)} °C again.`
  return `${where} is over ${woodLimitC(facts)} °C. Lid off, lower the fire.`
}

function climbWords(alarm: Alarm, { facts }: AlarmInput): string {
  const limit = facts.content.limits.climbMaximumCPerMin
  if (alarm.isEnding) return `Climbs slower than ${limit} °C a minute again.`
  return `Climbs faster than ${limit} °C a minute. Raise the barrel, or lid off.`
}

function noReadingWords(alarm: Alarm, { lead }: AlarmInput): string {
  const name = lead?.probeName ?? 'The lead probe'
  return alarm.isEnding
    ? `${name} reads again.`
    : `${name} has no reading. Look at the barrel, then its lead.`
}
