import { capitalize } from '@/lib/format'
import type { AlarmView } from '@/lib/alarms/alarm-delay'
import { viewAbove } from '@/lib/alarms/alarm-delay'
import type { AlarmKind } from '@/lib/alarms/alarm-kinds'
import type { AlarmCondition } from '@/lib/alarms/firing-alarms'
import type { FiringFacts } from '@/lib/live/firing-facts'
import type { GatewayNow } from '@/lib/live/gateway-watch'
import type { Signal } from '@/lib/live/live-signals'
import { overdueActs, stageNow } from '@/lib/live/stage-now'
import { planTempCAt } from '@/lib/science/plan'

/** What the alarms of a firing look at, at one moment. */
export type AlarmInput = {
  facts: FiringFacts
  lead: Signal | undefined
  opposite: Signal | undefined
  /** The pair is so far apart that one of the two must be wrong. */
  doesPairDisagree: boolean
  /** Climb over the rule's window, °C/min; null when it is not known. */
  windowClimbCPerMin: number | null
  /** Of the lead probe; null when it has no probe. */
  gateway: GatewayNow | null
  doseMin: number
  atMs: number
}

/** Below it wet wood lingers and is not called slow, °C (SCIENCE §5 counts from there). */
const belowBandFromPlanC = 120
const wetFromC = 92
const wetToC = 108
/** The last stage may go on for its dose; so long after its time it is overrun all the same, s. */
const lastStageLongestS = 600
/** A short pull is said for so long, s; then it has to be seen all the same. */
const pullSaidForS = 60

/** Every alarm's condition now. Alarms that cannot be on in this state of the firing are left out. */
export function alarmConditions(input: AlarmInput): AlarmCondition[] {
  const { state } = input.facts
  if (state === 'preheating') return reminders(input)
  if (state === 'bending') return [wood(input), ...signals(input), ...reminders(input)]
  if (state === 'toasting') {
    return [
      wood(input),
      ...signals(input),
      climb(input),
      spread(input),
      belowBand(input),
      overrun(input),
      shortPull(input),
      ...reminders(input),
    ]
  }
  return state === 'resting' ? [wood(input), ...signals(input), shortPull(input), ...reminders(input)] : []
}

type Said = Omit<AlarmCondition, 'kind' | 'subject' | 'suppressedBy' | 'delays'>

function condition(
  { facts }: AlarmInput,
  kind: AlarmKind,
  said: Said,
  more: Partial<Pick<AlarmCondition, 'subject' | 'suppressedBy'>> & { onDelayS?: number } = {},
): AlarmCondition {
  const { onDelayS, offDelayS } = facts.rules.alarms
  const { subject = '', suppressedBy = null } = more
  return { kind, subject, suppressedBy, delays: { onDelayS: more.onDelayS ?? onDelayS, offDelayS }, ...said }
}

function liveTempC(signal: Signal | undefined): number | null {
  return signal?.condition === 'live' ? signal.tempC : null
}

function wood(input: AlarmInput): AlarmCondition {
  const { facts, lead } = input
  const { bend, limits, leadPlace } = facts.content
  const limit = facts.state === 'bending' ? bend.woodLimitC : limits.woodMaximumC
  const where = leadPlace.depthMm === 0 ? 'The face' : `Wood at ${leadPlace.depthMm} mm`
  const value = liveTempC(lead)
  return condition(input, 'wood maximum', {
    view: viewAbove(value, limit, facts.rules.alarms.deadbandC),
    words: `${where} is over ${limit} °C. Lid off, lower the fire.`,
    endingWords: `${where} is below ${limit} °C again.`,
    value,
    limit,
  })
}

function signals(input: AlarmInput): AlarmCondition[] {
  const { facts, lead, gateway, atMs } = input
  const { gatewayLostAfterS } = facts.rules.signals
  const name = lead?.probeName ?? 'The lead probe'
  const isLost = gateway !== null && gateway.silentS > gatewayLostAfterS
  const silentMs = facts.rules.noReadingSilenceS * 1000
  const isTurnedOver = facts.marks.some(
    (mark) => mark.kind === 'turn over' && mark.atMs <= atMs && atMs - mark.atMs < silentMs,
  )
  const noReading = condition(
    input,
    'no reading',
    {
      view: lead?.condition === 'live' ? 'inside' : 'beyond',
      words: `${name} has no reading. Look at the barrel, then its lead.`,
      endingWords: `${name} reads again.`,
      value: null,
      limit: null,
    },
    {
      suppressedBy: isTurnedOver
        ? 'The barrel is being turned over.'
        : isLost
          ? 'Its gateway is lost, which says the same.'
          : null,
    },
  )
  if (gateway === null) return [noReading]
  // The silence is the on-delay.
  const lost = condition(
    input,
    'gateway lost',
    {
      view: isLost ? 'beyond' : 'inside',
      words: `No word from the gateway. Look at the barrel, then at ${gateway.name}, its power and cable.`,
      endingWords: 'The gateway is back.',
      value: null,
      limit: gatewayLostAfterS,
    },
    { subject: gateway.id, onDelayS: 0 },
  )
  return [lost, noReading]
}

function climb(input: AlarmInput): AlarmCondition {
  const { facts, windowClimbCPerMin: value } = input
  const limit = facts.content.limits.climbMaximumCPerMin
  return condition(input, 'climb maximum', {
    view: viewAbove(value, limit, limit * facts.rules.alarms.climbDeadbandShare),
    words: `Climbs over ${limit} °C a minute. Raise the barrel, or lid off.`,
    endingWords: `Climbs under ${limit} °C a minute again.`,
    value,
    limit,
  })
}

function spread(input: AlarmInput): AlarmCondition {
  const { facts, lead, opposite, doesPairDisagree } = input
  const [leadC, oppositeC] = [liveTempC(lead), liveTempC(opposite)]
  const limit = facts.content.limits.spreadC
  const value = leadC === null || oppositeC === null ? null : Math.abs(leadC - oppositeC)
  const { deadbandC, slowOnDelayS } = facts.rules.alarms
  const words = doesPairDisagree
    ? 'The two probes disagree. Which is wrong cannot be known: look at both, then turn the barrel.'
    : `The sides are over ${limit} °C apart. Turn the barrel, spread the fire.`
  return condition(
    input,
    'spread',
    {
      // A narrow limit keeps half of itself, else the alarm could never end.
      view: viewAbove(value, limit, Math.min(deadbandC, limit / 2)),
      words,
      endingWords: `The sides are under ${limit} °C apart again.`,
      value,
      limit,
    },
    { onDelayS: slowOnDelayS },
  )
}

function belowBand(input: AlarmInput): AlarmCondition {
  const { facts, lead, atMs } = input
  const toastS = facts.toastMs === null ? NaN : (atMs - facts.toastMs) / 1000
  const planC = planTempCAt(facts.plan.points, toastS)
  const stage = facts.plan.stages.find((one) => toastS >= one.startS && toastS <= one.endS)
  const tempC = liveTempC(lead)
  const { belowBandTimes, deadbandC, slowOnDelayS } = facts.rules.alarms
  const limit = stage === undefined ? null : belowBandTimes * stage.bandHalfWidthC
  const isCounted = planC !== null && limit !== null && planC >= belowBandFromPlanC
  const value = isCounted && tempC !== null ? planC - tempC : null
  const isWet = tempC !== null && tempC >= wetFromC && tempC <= wetToC
  const whatToDo = isWet ? 'It is still wet: wait, lid on.' : 'Feed the fire, lid on.'
  return condition(
    input,
    'below band',
    {
      view: isCounted ? viewAbove(value, limit, deadbandC) : 'inside',
      words: `Far below the plan. ${whatToDo}`,
      endingWords: 'Back near the plan.',
      value,
      limit,
    },
    { onDelayS: slowOnDelayS },
  )
}

function overrun(input: AlarmInput): AlarmCondition {
  const { facts, doseMin, atMs } = input
  const stage = stageNow(facts, atMs)
  const overS = stage === null ? 0 : -stage.leftS
  const { overrunAfterS } = facts.rules.alarms
  const isLast = stage !== null && stage.position === facts.content.stages.length
  const mayGoOn = isLast && doseMin < facts.plan.targetDoseMin && overS < lastStageLongestS
  const view: AlarmView = overS > overrunAfterS && !mayGoOn ? 'beyond' : overS > 0 ? 'between' : 'inside'
  const whatToDo = isLast ? 'Rest, or go on knowingly.' : 'End it, or go on knowingly.'
  return condition(input, 'stage overrun', {
    view,
    words: `${stage?.name ?? 'The stage'} is over its time. ${whatToDo}`,
    endingWords: 'The stage was ended.',
    value: Math.round(overS),
    limit: overrunAfterS,
  })
}

function shortPull(input: AlarmInput): AlarmCondition {
  const { facts, atMs } = input
  const pull = facts.marks.find((mark) => mark.kind === 'pull' && mark.atMs <= atMs)
  const pulledMs = pull?.atMs ?? facts.toastMs
  const limit = facts.content.bend.minimumMinutes
  const value = facts.bendMs === null || pulledMs === null ? null : (pulledMs - facts.bendMs) / 60_000
  const isShort = value !== null && value < limit
  const isFresh = pulledMs !== null && atMs - pulledMs < pullSaidForS * 1000
  const words = `The pull was under ${limit} min. Look for cracked staves before going on.`
  return condition(input, 'short pull', {
    view: isShort && isFresh ? 'beyond' : 'inside',
    words,
    endingWords: words,
    value,
    limit,
  })
}

/** Something due is reminded of a little after its time; it goes as soon as it is done. */
function reminders(input: AlarmInput): AlarmCondition[] {
  const { facts, atMs } = input
  const { remindAfterS } = facts.rules.alarms
  return overdueActs(facts, atMs)
    .filter((act) => atMs - act.atMs >= remindAfterS * 1000)
    .map((act) => {
      const words = `${capitalize(act.words)} was due. Do it and mark it.`
      const said: Said = { view: 'beyond', words, endingWords: words, value: null, limit: null }
      return {
        ...condition(input, 'reminder', said, { subject: act.subject }),
        delays: { onDelayS: 0, offDelayS: 0 },
      }
    })
}
