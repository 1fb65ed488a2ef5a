import type { FiringDto, MarkKind } from '@/lib/firings/schema'
import type { ShortStep, ShortStepFacts, ShortStepKind } from '@/lib/firings/short-steps'
import { shortSteps } from '@/lib/firings/short-steps'
import type { FiringFacts } from '@/lib/live/firing-facts'
import { planOf } from '@/lib/recipes/plan-of'
import type { SiteRules } from '@/lib/science/site-rules'
import type { MarkDraft, MarkQueue } from './fireside-mark-queue'

/** A mark as the fireside shows it: from the server, or still on its way. */
export type ShownMark = {
  id: string
  kind: MarkKind
  atMs: number
  stagePosition: number | null
  /** Of a reason: the step that it is given for. */
  step: ShortStepKind | null
  words: string
  isWaiting: boolean
}

/** A firing with what waits in this browser laid over it, so that a touch shows at once and a cut stops nothing. */
export type FiresideFacts = FiringFacts & {
  shownMarks: ShownMark[]
  /** Steps that were left out or short so far, and what they are found from. */
  shortSteps: ShortStep[]
  shortStepFacts: ShortStepFacts
}

/** Null for a firing that has not started: it has no recipe copy. */
export function firesideFacts(
  firing: FiringDto,
  queue: MarkQueue,
  rules: SiteRules,
  /** Taken by the server after this firing was fetched. */
  taken: readonly MarkDraft[] = [],
): FiresideFacts | null {
  if (firing.recipeCopy === null || firing.preheatAt === null) return null
  const waiting = [
    ...taken.filter((mark) => !queue.some((queued) => queued.mark.id === mark.id)),
    ...queue.filter((queued) => queued.refusal === null).map((queued) => queued.mark),
  ]
  const shownMarks = layMarks(firing, waiting)
  const phase = latestPhase(firing, waiting)
  const { content, recipeName } = firing.recipeCopy
  const shortStepFacts: ShortStepFacts = {
    content,
    preheatMs: Date.parse(firing.preheatAt),
    bendMs: phase.bendMs,
    toastMs: phase.toastMs,
    restMs: phase.restMs,
    endedMs: toMs(firing.endedAt),
    marks: shownMarks,
  }
  return {
    firingId: firing.id,
    revision: firing.revision,
    state: phase.state,
    hearthNumber: firing.hearthNumber,
    serial: firing.piece.serial,
    preheatMs: Date.parse(firing.preheatAt),
    bendMs: phase.bendMs,
    toastMs: phase.toastMs,
    restMs: phase.restMs,
    endedMs: toMs(firing.endedAt),
    moisturePercent: firing.moisturePercent,
    recipeName,
    content,
    plan: planOf(content, rules.dose),
    rules,
    assignments: [],
    marks: shownMarks.map(({ kind, atMs, stagePosition }) => ({ kind, atMs, stagePosition })),
    shownMarks,
    shortSteps: shortSteps(shortStepFacts),
    shortStepFacts,
  }
}

/** Marks in force, in time order, with the waiting ones added, moved and taken away. */
function layMarks(firing: FiringDto, waiting: readonly MarkDraft[]): ShownMark[] {
  const known = new Set(firing.marks.map((mark) => mark.id))
  const isReplaced = new Set(
    waiting.flatMap((mark) => (mark.replacesId === undefined ? [] : [mark.replacesId])),
  )
  const fromServer = firing.marks
    .filter((mark) => mark.isInForce)
    .map((mark) => ({
      id: mark.id,
      kind: mark.kind,
      atMs: Date.parse(mark.at),
      stagePosition: mark.stagePosition,
      step: mark.step,
      words: mark.words,
      isWaiting: false,
    }))
  const fromHere = waiting
    .filter((mark) => mark.kind !== 'undone' && !known.has(mark.id))
    .map((mark) => ({
      id: mark.id,
      kind: mark.kind,
      atMs: Date.parse(mark.at),
      stagePosition: mark.stagePosition ?? null,
      step: mark.step ?? null,
      words: mark.words ?? '',
      isWaiting: true,
    }))
  return [...fromServer, ...fromHere]
    .filter((mark) => !isReplaced.has(mark.id))
    .sort((a, b) => a.atMs - b.atMs)
}

type PhaseNow = Pick<FiringFacts, 'state' | 'bendMs' | 'toastMs' | 'restMs'>

function latestPhase(firing: FiringDto, waiting: readonly MarkDraft[]): PhaseNow {
  const from: PhaseNow = {
    state: firing.state,
    bendMs: toMs(firing.bendAt),
    toastMs: toMs(firing.toastAt),
    restMs: toMs(firing.restAt),
  }
  return waiting.reduce((before, mark) => {
    const atMs = Date.parse(mark.at)
    if (mark.phase === 'bending' && before.bendMs === null)
      return { ...before, state: mark.phase, bendMs: atMs }
    if (mark.phase === 'toasting' && before.toastMs === null) {
      return { ...before, state: mark.phase, toastMs: atMs }
    }
    if (mark.phase === 'resting' && before.restMs === null)
      return { ...before, state: mark.phase, restMs: atMs }
    return before
  }, from)
}

function toMs(at: string | null): number | null {
  return at === null ? null : Date.parse(at)
}

/** On or off, and since when; off from the start until a mark says otherwise. */
export function lidNow(marks: readonly ShownMark[]): { isOn: boolean; sinceMs: number | null } {
  const last = marks.findLast((mark) => mark.kind === 'lid on' || mark.kind === 'lid off')
  return { isOn: last?.kind === 'lid on', sinceMs: last?.atMs ?? null }
}

/** The pull's length in minutes once it is marked; short when under the recipe's minimum. */
export function pullOf(facts: FiresideFacts): { minutes: number; isShort: boolean } | null {
  const pull = facts.shownMarks.findLast((mark) => mark.kind === 'pull')
  if (pull === undefined || facts.bendMs === null) return null
  const minutes = (pull.atMs - facts.bendMs) / 60_000
  return { minutes, isShort: minutes < facts.content.bend.minimumMinutes }
}
