import type { FiringState } from '@/lib/live/events'
import type { FiringFacts } from '@/lib/live/firing-facts'
import type { MatchedStage } from '@/lib/science/score-types'
import { matchStages } from '@/lib/science/score-stages'

/** A mark this much before its cue still does it; a cue this much late is let go. */
const doneBeforeS = 120
const missedAfterS = 120
/** A look leaves no mark: it is over after this. */
const lookedAfterS = 30
/** A stage that is over waits this long for its mark; then the plan's minutes go on without it. */
const waitsForMarkS = 120
/** The last stage of a toast that goes on has no end yet. */
const openEndS = 1e9

/** Stages as they have run so far: by the toaster's marks, by the plan's minutes where there is none. */
export function matchedStages(facts: FiringFacts): MatchedStage[] {
  const { toastMs, restMs, marks, content } = facts
  if (toastMs === null) return []
  const stageMarks = marks.flatMap((mark) =>
    mark.kind === 'stage' && mark.stagePosition !== null
      ? // The mark names the stage that ended, from 1; the one that begins has that index, from 0.
        [{ stageIndex: mark.stagePosition, timeS: (mark.atMs - toastMs) / 1000 }]
      : [],
  )
  return matchStages(content.stages, stageMarks, restMs === null ? openEndS : (restMs - toastMs) / 1000)
}

/** The stage that the toast is in; null before the toast and after it. `leftS` falls below 0 when it is late. */
export function stageNow(facts: FiringFacts, atMs: number): FiringState['stage'] {
  if (facts.state !== 'toasting' || facts.toastMs === null) return null
  const toastS = (atMs - facts.toastMs) / 1000
  const stages = matchedStages(facts)
  const position = Math.max(
    0,
    stages.findLastIndex((stage) => stage.startS + (stage.isMarked ? 0 : waitsForMarkS) <= toastS),
  )
  const stage = stages[position]
  if (stage === undefined) return null
  const elapsedS = toastS - stage.startS
  return { position: position + 1, name: stage.name, elapsedS, leftS: stage.planMinutes * 60 - elapsedS }
}

type Due = { words: string; atMs: number }

/** What hands should have done by now: to be reminded of until it is done or let go. */
export type OverdueAct = { subject: string; words: string; atMs: number }

/**
 * What was due by the recipe and is not marked, oldest first: cues of this stage until they are let go, and the end of
 * preheat, bend and rest. A look leaves no mark and is not asked for.
 */
export function overdueActs(facts: FiringFacts, atMs: number): OverdueAct[] {
  if (facts.state !== 'toasting') {
    const due = nextDue(facts, atMs)
    return due === null || due.atMs > atMs ? [] : [{ subject: facts.state, ...due }]
  }
  const now = stageNow(facts, atMs)
  const stage = now === null ? undefined : facts.content.stages[now.position - 1]
  if (now === null || stage === undefined) return []
  const startMs = atMs - now.elapsedS * 1000
  return stage.cues.flatMap((cue, i) => {
    const cueMs = startMs + cue.minute * 60_000
    if (cue.action === 'look' || cueMs > atMs || isOver(facts, cue.action, cueMs, atMs)) return []
    return [{ subject: `cue ${now.position}.${i + 1}`, words: cue.words || cue.action, atMs: cueMs }]
  })
}

/** What hands do next and when; "Nothing to do" when there is nothing. */
export function nextAction(facts: FiringFacts, atMs: number): FiringState['next'] {
  const due = nextDue(facts, atMs)
  if (due === null) return { words: 'Nothing to do', dueInS: null }
  const dueInS = (due.atMs - atMs) / 1000
  return { words: dueInS <= 0 ? `${due.words} now` : `then ${due.words}`, dueInS }
}

function nextDue(facts: FiringFacts, atMs: number): Due | null {
  const { content } = facts
  if (facts.state === 'preheating') {
    return { words: 'bend', atMs: facts.preheatMs + content.preheat.minutes * 60_000 }
  }
  if (facts.state === 'bending' && facts.bendMs !== null) {
    return { words: 'toast', atMs: facts.bendMs + content.bend.minimumMinutes * 60_000 }
  }
  if (facts.state === 'resting' && facts.restMs !== null) {
    return { words: 'finish', atMs: facts.restMs + content.restMinutes * 60_000 }
  }
  if (facts.state !== 'toasting' || facts.toastMs === null) return null
  const dues = toastDues(facts, facts.toastMs, atMs).sort((a, b) => a.atMs - b.atMs)
  return dues[0] ?? null
}

/** Everything that is still to do in this stage, and what its end brings. */
function toastDues(facts: FiringFacts, toastMs: number, atMs: number): Due[] {
  const now = stageNow(facts, atMs)
  const stage = now === null ? undefined : facts.content.stages[now.position - 1]
  if (now === null || stage === undefined) return []
  const startMs = atMs - now.elapsedS * 1000
  const endMs = atMs + now.leftS * 1000
  const lid = lidNow(facts, atMs)
  const dues: Due[] = stage.cues.flatMap((cue) => {
    const cueMs = startMs + cue.minute * 60_000
    return isOver(facts, cue.action, cueMs, atMs) ? [] : [{ words: cue.words || cue.action, atMs: cueMs }]
  })
  if (stage.lid !== lid && atMs < startMs + missedAfterS * 1000) {
    dues.push({ words: `lid ${stage.lid}`, atMs: Math.max(startMs, toastMs) })
  }
  const after = facts.content.stages[now.position]
  if (after === undefined) dues.push({ words: 'rest', atMs: endMs })
  else dues.push({ words: after.lid === lid ? after.name : `lid ${after.lid}`, atMs: endMs })
  return dues
}

function isOver(facts: FiringFacts, action: string, cueMs: number, atMs: number): boolean {
  if (action === 'look') return atMs > cueMs + lookedAfterS * 1000
  if (atMs > cueMs + missedAfterS * 1000) return true
  return facts.marks.some(
    (mark) => mark.kind === action && mark.atMs >= cueMs - doneBeforeS * 1000 && mark.atMs <= atMs,
  )
}

/** By the last mark; off until one says on. */
function lidNow(facts: FiringFacts, atMs: number): 'on' | 'off' {
  const last = facts.marks.findLast(
    (mark) => (mark.kind === 'lid on' || mark.kind === 'lid off') && mark.atMs <= atMs,
  )
  return last?.kind === 'lid on' ? 'on' : 'off'
}
