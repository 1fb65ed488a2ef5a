import { stageNow } from '@/lib/live/stage-now'
import type { FiresideFacts } from './fireside-facts'
import { pullOf } from './fireside-facts'
import { inSentence } from './fireside-figures'
import type { MarkDraft } from './fireside-mark-queue'

/** What the one large control does now, and whether its time has come. */
export type MainStep = {
  label: string
  isDue: boolean
  /** The mark it makes; the finish has a sheet of its own instead. */
  mark: Pick<MarkDraft, 'kind' | 'phase' | 'stagePosition'> | 'finish'
  /** Past tense, for what stands on the screen afterwards: "Hold ended". */
  doneWords: string
}

/** The large clock: what it counts in words, and its seconds, never below nought. */
export type StepClock = { words: string; seconds: number }

export function mainStep(facts: FiresideFacts, nowMs: number): MainStep | null {
  const { content } = facts
  if (facts.state === 'preheating') {
    const isDue = nowMs - facts.preheatMs >= content.preheat.minutes * 60_000
    return isBent(facts) ? phaseStep('Start the bend', 'bending', isDue) : toastStep(isDue)
  }
  if (facts.state === 'bending') {
    if (pullOf(facts) !== null) return toastStep(true)
    const isDue = nowMs - (facts.bendMs ?? nowMs) >= content.bend.minimumMinutes * 60_000
    return { label: 'Pull done', isDue, mark: { kind: 'pull' }, doneWords: 'Pull done' }
  }
  if (facts.state === 'toasting') return stageStep(facts, nowMs)
  if (facts.state === 'resting') {
    const isDue = nowMs - (facts.restMs ?? nowMs) >= content.restMinutes * 60_000
    return { label: 'Finish', isDue, mark: 'finish', doneWords: 'Finished' }
  }
  return null
}

/** What is seldom done at this step: a bend that is left out (the rose is bent already), a rest that is. */
export type SeldomStep = { label: string; step: MainStep }

export function seldomSteps(facts: FiresideFacts): SeldomStep[] {
  if (facts.state === 'preheating' && isBent(facts)) {
    return [{ label: 'Leave out the bend, start the toast', step: toastStep(false) }]
  }
  if (facts.state !== 'toasting') return []
  const finish: MainStep = { label: 'Finish', isDue: false, mark: 'finish', doneWords: 'Finished' }
  return [{ label: 'Leave out the rest, finish', step: finish }]
}

/** Heads are not bent, nor is a rose whose recipe asks no pull. */
function isBent({ content }: FiresideFacts): boolean {
  return content.pieceKind === 'barrel' && content.bend.minimumMinutes > 0
}

function toastStep(isDue: boolean): MainStep {
  return phaseStep('Start the toast', 'toasting', isDue)
}

const startedWords = { bending: 'Bend started', toasting: 'Toast started', resting: 'Rest started' } as const

function phaseStep(label: string, phase: 'bending' | 'toasting' | 'resting', isDue: boolean): MainStep {
  return { label, isDue, mark: { kind: 'phase', phase }, doneWords: startedWords[phase] }
}

function stageStep(facts: FiresideFacts, nowMs: number): MainStep | null {
  const stage = stageNow(facts, nowMs)
  if (stage === null) return null
  const isDue = stage.leftS <= 0
  if (stage.position >= facts.content.stages.length) return phaseStep('Start rest', 'resting', isDue)
  return {
    label: `End ${inSentence(stage.name)}`,
    isDue,
    mark: { kind: 'stage', stagePosition: stage.position },
    doneWords: `${stage.name} ended`,
  }
}

export function stepClock(facts: FiresideFacts, nowMs: number): StepClock | null {
  const { content } = facts
  if (facts.state === 'preheating') {
    return countDown('Preheat', facts.preheatMs + content.preheat.minutes * 60_000, nowMs)
  }
  if (facts.state === 'bending' && facts.bendMs !== null) {
    const pull = pullOf(facts)
    if (pull !== null) return { words: 'Pull took', seconds: pull.minutes * 60 }
    const leftMs = facts.bendMs + content.bend.minimumMinutes * 60_000 - nowMs
    if (leftMs > 0) return { words: 'Bend, at least', seconds: leftMs / 1000 }
    return { words: 'Bend, so far', seconds: (nowMs - facts.bendMs) / 1000 }
  }
  if (facts.state === 'resting' && facts.restMs !== null) {
    return countDown('Rest', facts.restMs + content.restMinutes * 60_000, nowMs)
  }
  const stage = stageNow(facts, nowMs)
  return stage === null ? null : countDown(stage.name, nowMs + stage.leftS * 1000, nowMs)
}

function countDown(name: string, endMs: number, nowMs: number): StepClock {
  const leftS = (endMs - nowMs) / 1000
  if (leftS >= 0) return { words: `${name}, time left`, seconds: leftS }
  return { words: `${name}, over by`, seconds: -leftS }
}
