import { randomUUID } from 'node:crypto'
import type { ThermocoupleType } from '@/lib/science/thermocouple'
import {
  createHearth,
  type Hearth,
  type HearthContinuation,
  type HearthMark,
  type HearthProbe,
  type HearthReading,
} from './hearth'
import type { CueAction } from './recipe'
import { hearthRecipeOf } from './recipe-of-content'
import {
  ServerRefusal,
  type NewMark,
  type ServerView,
  type ViewedFiring,
  type ViewedReadings,
} from './server-view'
import { cueAction } from './toaster'

/** One firing on the server with the simulated hearth that makes its readings. */
export type FollowedFiring = {
  firingId: string
  /** Goes on to `nowMs` and reads each probe; `timeS` of the readings is the wall clock's. */
  advanceTo: (nowMs: number) => HearthReading[]
  /** Takes over what was done on the console since the last look, and posts the own toaster's marks. */
  synchronise: () => Promise<void>
  woodTempC: () => { lead: number; opposite: number; coals: number }
}

type LivePhase = HearthContinuation['phase']
type Errand = { kind: 'mark'; mark: NewMark; markId: string } | { kind: 'finish'; at: Date }
type Options = {
  view: ServerView
  firing: ViewedFiring
  readings: ViewedReadings
  isOwn: boolean
  skill: number
  thermocoupleTypes: Partial<Record<HearthProbe, ThermocoupleType>>
  nowMs: number
  say: (sentence: string) => void
}

/** Longest time that is made up for in one go. */
const LONGEST_CATCH_UP_S = 3_600

export function isLivePhase(state: string): state is LivePhase {
  return state === 'preheating' || state === 'bending' || state === 'toasting' || state === 'resting'
}

/** Instant at which the firing's present phase began, ms since 1970. */
export function phaseStartMs(firing: ViewedFiring): number {
  const at = {
    preheating: firing.preheatAt,
    bending: firing.bendAt,
    toasting: firing.toastAt,
    resting: firing.restAt,
  }
  const instant = isLivePhase(firing.state) ? at[firing.state] : null
  return instant === null ? Date.parse(firing.preheatAt ?? '') : Date.parse(instant)
}

/** Instant of the last stored lead reading, ms since 1970, or null. */
export function lastReadingMs(readings: ViewedReadings): number | null {
  const lead = readings.series.find((series) => series.role === 'lead')
  const lastS = lead?.timeS.at(-1)
  return lastS === undefined ? null : Date.parse(readings.zeroAt) + lastS * 1_000
}

/** Begins to make readings for a live firing, from where its stored ones end. Null when it has no recipe copy. */
export function followFiring(options: Options): FollowedFiring | null {
  const { firing, view, say, isOwn } = options
  if (firing.recipeCopy === null || !isLivePhase(firing.state)) return null
  const hearth = createHearth({
    seed: seedOf(firing.id),
    recipe: hearthRecipeOf(firing.recipeCopy.content),
    skill: options.skill,
    moisturePercent: firing.moisturePercent ?? 18,
    thermocoupleTypes: options.thermocoupleTypes,
    isConsoleLed: !isOwn,
  })
  const startMs = lastReadingMs(options.readings) ?? phaseStartMs(firing)
  hearth.continueFrom(continuationOf(firing, options.readings, startMs))
  const seenMarkIds = new Set(firing.marks.map((mark) => mark.id))
  const errands: Errand[] = []
  let atMs = Math.max(startMs, options.nowMs - LONGEST_CATCH_UP_S * 1_000)
  let isRunningErrands = false

  const advance = (dtS: number) => {
    const { readings, marks } = hearth.advance(dtS)
    atMs += dtS * 1_000
    for (const mark of marks) errands.push(...errandsOf(mark, new Date(Math.round(atMs)), seenMarkIds))
    return readings
  }
  // What the probes would have said since the last stored reading: sent late, as from a gateway's spool.
  let backlog: HearthReading[] = []
  while (options.nowMs - atMs > 1_000) {
    backlog.push(...advance(1).map((reading) => ({ ...reading, timeS: atMs / 1_000 })))
  }

  const runErrands = async () => {
    for (let errand = errands[0]; errand !== undefined; errand = errands[0]) {
      try {
        if (errand.kind === 'finish') await view.finishFiring(firing.id, errand.at)
        else await view.addMark(firing.id, errand.mark, errand.markId)
      } catch (error) {
        // No answer: it is tried again at the next look. A refusal stands: a person was there first.
        if (!(error instanceof ServerRefusal) || error.status === 0 || error.status >= 500) throw error
        say(`a mark was not taken (${error.status}): ${error.message}`)
      }
      errands.shift()
    }
  }

  return {
    firingId: firing.id,
    advanceTo: (nowMs) => {
      const dtS = (nowMs - atMs) / 1_000
      if (dtS <= 0) return []
      const late = backlog
      backlog = []
      return [...late, ...advance(dtS).map((reading) => ({ ...reading, timeS: nowMs / 1_000 }))]
    },
    synchronise: async () => {
      if (isRunningErrands) return
      isRunningErrands = true
      try {
        await runErrands()
        const seen = await view.getFiring(firing.id)
        if (errands.length === 0) obeyConsole(hearth, seen, seenMarkIds)
      } finally {
        isRunningErrands = false
      }
    },
    woodTempC: () => hearth.woodTempC(),
  }
}

/** What the own toaster's mark means on the console. Its id counts as seen, so that it is not obeyed a second time. */
function errandsOf(mark: HearthMark, at: Date, seenMarkIds: Set<string>): Errand[] {
  if (mark.kind === 'phase') {
    if (mark.phase === 'finished') return [{ kind: 'finish', at }]
    if (mark.phase === 'preheating') return []
  }
  const markId = randomUUID()
  seenMarkIds.add(markId)
  return [{ kind: 'mark', markId, mark: newMarkOf(mark, at) }]
}

function newMarkOf(mark: HearthMark, at: Date): NewMark {
  if (mark.kind === 'stage') return { kind: 'stage', at, stagePosition: mark.stageIndex }
  if (mark.kind !== 'phase') return { kind: mark.kind, at }
  if (mark.phase === 'preheating' || mark.phase === 'finished')
    throw new RangeError(`no mark for ${mark.phase}`)
  return { kind: 'phase', at, phase: mark.phase }
}

/** Brings the simulated hearth to what the console says: phase, stage, and what people did to the fire. */
function obeyConsole(hearth: Hearth, firing: ViewedFiring, seenMarkIds: Set<string>) {
  if (isLivePhase(firing.state)) hearth.enterPhase(firing.state)
  const stageIndex = stageIndexOf(firing)
  if (stageIndex > hearth.stageIndex()) hearth.enterStage(stageIndex)
  for (const mark of firing.marks) {
    if (seenMarkIds.has(mark.id)) continue
    seenMarkIds.add(mark.id)
    const action = cueAction(mark.kind)
    if (action !== null && mark.isInForce) hearth.act(action)
  }
}

/** A stage mark names the stage that ended, from 1: the same number as the index of the one that begins. */
function stageIndexOf(firing: ViewedFiring): number {
  const count = firing.recipeCopy?.content.stages.length ?? 1
  const ended = stageMarks(firing).map((mark) => mark.stagePosition ?? 0)
  return Math.min(count - 1, Math.max(0, ...ended))
}

function stageMarks(firing: ViewedFiring) {
  return firing.marks.filter((mark) => mark.kind === 'stage' && mark.isInForce)
}

function continuationOf(firing: ViewedFiring, readings: ViewedReadings, atMs: number): HearthContinuation {
  const stageIndex = stageIndexOf(firing)
  const startsMs = phaseStartMs(firing)
  const stageMark = stageMarks(firing).find((mark) => mark.stagePosition === stageIndex)
  const stageStartMs = stageMark === undefined ? startsMs : Date.parse(stageMark.at)
  const lidMarks: CueAction[] = firing.marks
    .filter((mark) => mark.isInForce)
    .flatMap((mark) => (mark.kind === 'lid on' || mark.kind === 'lid off' ? [mark.kind] : []))
  return {
    phase: isLivePhase(firing.state) ? firing.state : 'preheating',
    phaseTimeS: Math.max(0, (atMs - startsMs) / 1_000),
    stageIndex,
    stageTimeS: Math.max(0, (atMs - stageStartMs) / 1_000),
    isLidOn: lidMarks.at(-1) === 'lid on',
    points: pointsOf(readings, 'lead'),
    doseMin: null,
    oppositeTempC: pointsOf(readings, 'opposite').at(-1)?.tempC ?? null,
  }
}

function pointsOf(readings: ViewedReadings, role: HearthProbe): { timeS: number; tempC: number }[] {
  const series = readings.series.find((one) => one.role === role)
  if (series === undefined) return []
  return series.timeS.flatMap((timeS, i) => {
    const tempC = series.tempC[i] ?? null
    return tempC === null ? [] : [{ timeS, tempC }]
  })
}

/** The same firing gets the same hearth again after a restart of the simulator. */
function seedOf(firingId: string): number {
  return Number.parseInt(firingId.replaceAll('-', '').slice(-8), 16)
}
