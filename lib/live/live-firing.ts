import { randomUUID } from 'node:crypto'
import type { AlarmMove, AlarmStanding, PresentAlarm } from '@/lib/alarms/firing-alarms'
import { createFiringAlarms } from '@/lib/alarms/firing-alarms'
import { isSounding } from '@/lib/alarms/alarm-states'
import type { ProbeAssignment } from '@/lib/ingest/firing-probes'
import type { FiringJoined, FiringState } from '@/lib/live/events'
import { alarmConditions } from '@/lib/live/alarm-conditions'
import type { CheckedCurve } from '@/lib/live/checked-curve'
import { createCheckedCurve } from '@/lib/live/checked-curve'
import type { FiringFacts } from '@/lib/live/firing-facts'
import type { GatewayNow, GatewayWatch } from '@/lib/live/gateway-watch'
import { createPairWatch, troublesOf } from '@/lib/live/pair-watch'
import { liveForecast } from '@/lib/live/live-forecast'
import type { NewestFlag, Role, Signal } from '@/lib/live/live-signals'
import { liveSignals } from '@/lib/live/live-signals'
import { createLiveStave } from '@/lib/live/live-stave'
import type { PointStream } from '@/lib/live/point-stream'
import { createPointStream } from '@/lib/live/point-stream'
import type { RoleCurve } from '@/lib/live/role-curve'
import { createRunningDose } from '@/lib/live/running-dose'
import { nextAction, stageNow } from '@/lib/live/stage-now'
import { planDoseAt } from '@/lib/recipes/plan-of'
import { climbRateCPerMin } from '@/lib/science/curve'
import { gapHalfLog10 } from '@/lib/science/dose-interval'
import { percentAboveFromLog10 } from '@/lib/science/dose-ratio'
import { fillGaps, gapExtremes } from '@/lib/science/gaps'
import { planTempCAt } from '@/lib/science/plan'
import { recordSpacingS } from '@/lib/science/record-spacing'
import { sameMountHalfLog10 } from '@/lib/science/same-mount'
import { climbsCPerMin } from '@/lib/science/score-limits'

/** What makes viewers be told at once, and not only at the next second. */
export type Glance = {
  signals: Signal[]
  alarms: PresentAlarm[]
  troubles: FiringState['troubles']
  words: string
  position: number | null
}

/** One firing as the hub holds it: its readings so far and everything computed from them. */
export type LiveFiring = {
  readonly epoch: string
  readonly stream: PointStream
  facts: () => FiringFacts
  /** The same firing read again; its probes and their periods must not have shrunk. */
  setFacts: (facts: FiringFacts) => void
  put: (assignment: ProbeAssignment, atMs: number, tempC: number, flag: number) => void
  /** Advances dose and alarms; cheap enough for every tick. */
  glance: (atMs: number) => Glance
  /** Advances everything. */
  state: (atMs: number) => FiringState
  staveColumns: () => FiringJoined['staveColumns']
  /** What its alarms did by themselves since the last call. */
  takeAlarmMoves: () => AlarmMove[]
  /** As the table has them; those that `isPending` stay as they are here. */
  restoreAlarms: (standings: readonly AlarmStanding[], isPending?: (key: string) => boolean) => void
}

const climbWindowS = 30
/** Gaps widen the interval slowly; looking for them walks the whole curve. */
const gapsEveryMs = 5_000

export type LiveFiringOptions = {
  /** Left out: nothing is known of gateways, and none is called lost. */
  gateways?: GatewayWatch
  /** False: the stave model, which costs most, is left out; for a replay of the alarms. */
  hasStave?: boolean
}

export function createLiveFiring(
  firstFacts: FiringFacts,
  { gateways, hasStave = true }: LiveFiringOptions = {},
): LiveFiring {
  const epoch = randomUUID()
  const stream = createPointStream()
  const checks = firstFacts.rules.signals
  const curves: Record<Role, CheckedCurve> = {
    lead: createCheckedCurve(checks),
    opposite: createCheckedCurve(checks),
    // Coals may do what wood cannot.
    coals: createCheckedCurve({ ...checks, areChecked: false }),
  }
  const none: NewestFlag = { atMs: -Infinity, flag: 0 }
  const flags: Record<Role, NewestFlag> = { lead: { ...none }, opposite: { ...none }, coals: { ...none } }
  let facts = firstFacts
  const dose = createRunningDose(facts.rules.dose, (curve) => {
    return 1000 * facts.rules.gaps.gapFromSpacings * recordSpacingS(curve.since(0).atMs)
  })
  const alarms = createFiringAlarms()
  const pair = createPairWatch(checks)
  let stave = createLiveStave(facts)
  let doseMin = 0
  let gaps: DoseGaps = { atMs: -Infinity, log10Half: sameMountHalfLog10(facts.rules), isIncomplete: false }

  const setWindow = () => {
    const { toastMs, restMs, endedMs } = facts
    dose.setWindow(toastMs === null ? null : { toastMs, restMs: restMs ?? endedMs })
  }
  setWindow()

  /** What was found to be none goes out again as no reading, and no longer counts. */
  const settle = (role: 'lead' | 'opposite') => {
    const other = curves[role === 'lead' ? 'opposite' : 'lead'].raw
    const changed = curves[role].settle(curves.coals.length > 0 ? curves.coals.raw : other)
    for (const i of changed) stream.push(role, curves[role].atMs(i), curves[role].tempC(i))
    if (role === 'lead' && changed[0] !== undefined) {
      dose.touch(changed[0])
      stave.touch(changed[0])
    }
  }
  const gatewayOfLead = (atMs: number): GatewayNow | null => {
    const lead = facts.assignments.findLast((one) => one.role === 'lead' && one.fromMs <= atMs)
    return lead === undefined ? null : (gateways?.at(lead.gatewayId, atMs) ?? null)
  }
  const advance = (atMs: number) => {
    settle('lead')
    settle('opposite')
    doseMin = dose.advance(curves.lead)
    if (hasStave) stave.advance(curves.lead, atMs)
    const signals = liveSignals(facts, curves, flags, atMs)
    const lead = signals.find((signal) => signal.role === 'lead')
    const opposite = signals.find((signal) => signal.role === 'opposite')
    const gateway = gatewayOfLead(atMs)
    const doesPairDisagree = pair.see(lead, opposite, atMs)
    const windowClimbCPerMin = climbOver(curves.lead, facts.rules.limits.climbWindowS, atMs)
    if (facts.endedMs === null) {
      const input = { facts, lead, opposite, doesPairDisagree, windowClimbCPerMin, gateway, doseMin, atMs }
      alarms.see(alarmConditions(input), atMs)
    }
    const present = facts.endedMs === null ? alarms.present() : []
    return { signals, lead, present, troubles: troublesOf({ facts, gateway, doesPairDisagree }) }
  }

  return {
    epoch,
    stream,
    facts: () => facts,
    setFacts: (newer) => {
      const isStaveNew = newer.toastMs !== facts.toastMs || newer.moisturePercent !== facts.moisturePercent
      facts = newer
      setWindow()
      if (isStaveNew) stave = createLiveStave(facts)
      gaps = { ...gaps, atMs: -Infinity }
    },
    put: ({ role }, atMs, tempC, flag) => {
      const curve = curves[role]
      const effect = curve.put(atMs, tempC)
      if (atMs >= flags[role].atMs) flags[role] = { atMs, flag }
      if (effect === 'same') return
      stream.push(role, atMs, effect === 'appended' ? curve.tempC(curve.length - 1) : tempC)
      if (role === 'lead' && effect !== 'appended') {
        dose.touch(curve.indexFrom(atMs))
        if (effect === 'inserted') stave.touch(curve.indexFrom(atMs))
      }
    },
    glance: (atMs) => {
      const { signals, present, troubles } = advance(atMs)
      const { words } = nextAction(facts, atMs)
      const position = stageNow(facts, atMs)?.position ?? null
      return { signals, alarms: present, troubles, words, position }
    },
    state: (atMs) => {
      const { signals, lead, present, troubles } = advance(atMs)
      const { toastMs, plan } = facts
      const toastS = toastMs === null ? null : (atMs - toastMs) / 1000
      const isLive = lead?.condition === 'live'
      const climb = isLive ? climbNow(curves.lead) : null
      if (atMs - gaps.atMs >= gapsEveryMs) gaps = doseGaps(facts, curves.lead, doseMin, atMs)
      return {
        firingId: facts.firingId,
        epoch,
        atMs: Math.round(atMs),
        state: facts.state,
        revision: facts.revision,
        signals,
        woodTempC: isLive ? lead.tempC : null,
        planTempC: toastS === null || toastS < 0 ? null : planTempCAt(plan.points, toastS),
        climbCPerMin: climb === null ? null : Math.round(climb * 100) / 100,
        toastS,
        stage: stageNow(facts, atMs),
        next: nextAction(facts, atMs),
        dose: {
          minutes: doseMin,
          targetMinutes: plan.targetDoseMin,
          planMinutesNow:
            toastS === null || toastS < 0 ? 0 : planDoseAt(plan.points, facts.rules.dose, toastS),
          goodToPercent: percentAboveFromLog10(gaps.log10Half),
          isIncomplete: gaps.isIncomplete,
        },
        forecast: liveForecast({
          facts,
          lead,
          doseMin,
          climbCPerMin: climb,
          intervalLog10: gaps.log10Half,
          atMs,
        }),
        stave: stave.newest(),
        troubles,
        alarms: present,
        alarm: gravestOf(present),
      }
    },
    staveColumns: () => stave.columns(),
    takeAlarmMoves: alarms.takeMoves,
    restoreAlarms: alarms.restore,
  }
}

/** Of those that are on; a reminder is no alarm. */
function gravestOf(present: readonly PresentAlarm[]): FiringState['alarm'] {
  const gravest = present.find((alarm) => isSounding(alarm.state) && alarm.level !== 'grey')
  if (gravest === undefined || gravest.level === 'grey') return null
  return { words: gravest.words, level: gravest.level, sinceMs: gravest.sinceMs }
}

function climbNow(curve: RoleCurve): number | null {
  const last = curve.length === 0 ? NaN : curve.atMs(curve.length - 1)
  const recent = curve.since(last - climbWindowS * 1000)
  if (recent.atMs.length === 0) return null
  return climbRateCPerMin(
    recent.atMs.map((atMs) => (atMs - last) / 1000),
    recent.tempC,
    climbWindowS,
  )
}

/** Least-squares climb over the last whole window of readings; null when there is none. */
function climbOver(curve: RoleCurve, windowS: number, atMs: number): number | null {
  const recent = curve.since(atMs - windowS * 1000 - 2_000)
  const timeS: number[] = []
  const tempC: number[] = []
  recent.atMs.forEach((at, i) => {
    const temp = recent.tempC[i] ?? NaN
    if (Number.isNaN(temp)) return
    timeS.push((at - atMs) / 1000)
    tempC.push(temp)
  })
  const climb = climbsCPerMin({ timeS, tempC }, windowS).at(-1) ?? NaN
  return Number.isNaN(climb) ? null : climb
}

/** A thousandth to a thousand times: wider says no more. */
const WIDEST_LOG10 = 3

type DoseGaps = { atMs: number; log10Half: number; isIncomplete: boolean }

/** How good the dose is: the same-mount interval, widened by gaps over 30 s, and whether gaps leave it incomplete. */
function doseGaps(facts: FiringFacts, curve: RoleCurve, doseMin: number, atMs: number): DoseGaps {
  const { rules, toastMs, restMs, plan } = facts
  const sameMount = sameMountHalfLog10(rules)
  const none = { atMs, log10Half: sameMount, isIncomplete: false }
  if (toastMs === null) return none
  const toS = ((restMs ?? atMs) - toastMs) / 1000
  if (toS <= 0) return none
  const read = curve.since(toastMs - 1_000)
  const timeS = read.atMs.map((at) => (at - toastMs) / 1000)
  const series = { timeS, tempC: read.tempC, spacingS: recordSpacingS(read.atMs) }
  const filled = fillGaps(series, { fromS: 0, toS }, rules.gaps)
  if (filled === null) return { ...none, isIncomplete: toS > rules.gaps.widenUpToS }
  // While the toast goes on, the share of missing time is taken of the whole plan: seconds into it every gap is a lot.
  const wholeS = restMs === null ? Math.max(toS, plan.totalS) : toS
  const isIncomplete =
    filled.gaps.some((gap) => gap.treatment === 'incomplete') ||
    filled.missingShare * toS > rules.gaps.incompleteAboveShare * wholeS
  if (filled.gaps.every((gap) => gap.treatment === 'interpolated') || doseMin <= 0) {
    return { ...none, isIncomplete }
  }
  const lastC = plan.points.at(-1)?.tempC ?? 0
  const extremes = gapExtremes(filled, rules.dose, (at) => planTempCAt(plan.points, at) ?? lastC)
  const { low, high } = gapHalfLog10(doseMin, extremes)
  return { atMs, log10Half: Math.hypot(sameMount, Math.min(WIDEST_LOG10, Math.max(low, high))), isIncomplete }
}
