import { capitalize } from '@/lib/format'
import type { FiringDto, shortStepKinds } from '@/lib/firings/schema'
import type { RecipeContent } from '@/lib/recipes/schema'
import { matchStages } from '@/lib/science/score-stages'

export type ShortStepKind = (typeof shortStepKinds)[number]

/** A step of the sequence that was left out, or had less time than the recipe asks. */
export type ShortStep = {
  step: ShortStepKind
  /** Of a stage, from 1. */
  stagePosition: number | null
  /** "Preheat", "Pull", the stage's name, "Rest". */
  name: string
  isSkipped: boolean
  actualMinutes: number
  askedMinutes: number
  /** As the toaster gave it; null while nobody did. It stands beside the score, never inside. */
  reason: string | null
}

/** What is looked at; instants in ms since 1970 UTC, marks in force and in time order. */
export type ShortStepFacts = {
  content: RecipeContent
  preheatMs: number
  bendMs: number | null
  toastMs: number | null
  restMs: number | null
  endedMs: number | null
  marks: readonly {
    kind: string
    atMs: number
    stagePosition: number | null
    step: ShortStepKind | null
    words: string
  }[]
}

/** Pressed within a second of its time is in time: clocks are shown in whole seconds. */
const slackMin = 1 / 60
/** A stage that ended so much of its planned time early, and at least so many minutes, was cut short (judgement). */
const stageShortShare = 0.25
const stageShortMin = 1
/** The last stage of a toast that goes on has no end yet, s. */
const openEndS = 1e9

/** Every step so far that was skipped or short, in the order of the sequence, each with its reason or without. */
export function shortSteps(facts: ShortStepFacts): ShortStep[] {
  return [...preheat(facts), ...bend(facts), ...stages(facts), ...rest(facts)].map((step) => ({
    ...step,
    reason: reasonOf(facts, step),
  }))
}

/** The rest as it would be if the firing ended at `atMs`; null when it is long enough, or the recipe asks none. */
export function shortRest(facts: ShortStepFacts, atMs: number): ShortStep | null {
  return shortSteps({ ...facts, endedMs: atMs }).find(({ step }) => step === 'rest') ?? null
}

type Found = Omit<ShortStep, 'reason'>

function found(
  step: ShortStepKind,
  name: string,
  actual: { minutes: number; isSkipped?: boolean },
  askedMinutes: number,
  stagePosition: number | null = null,
): Found {
  const { minutes: actualMinutes, isSkipped = false } = actual
  return { step, name, stagePosition, isSkipped, actualMinutes, askedMinutes }
}

const minutes = (fromMs: number, toMs: number) => (toMs - fromMs) / 60_000

function preheat({ content, preheatMs, bendMs, toastMs }: ShortStepFacts): Found[] {
  const endMs = bendMs ?? toastMs
  const asked = content.preheat.minutes
  if (endMs === null) return []
  const actual = minutes(preheatMs, endMs)
  return actual >= asked - slackMin ? [] : [found('preheat', 'Preheat', { minutes: actual }, asked)]
}

/** The pull, from the bend's start to its mark, or to the toast when none was made. */
function bend({ content, bendMs, toastMs, marks }: ShortStepFacts): Found[] {
  const asked = content.pieceKind === 'barrel' ? content.bend.minimumMinutes : 0
  if (bendMs === null) {
    return toastMs === null || asked === 0
      ? []
      : [found('bend', 'Pull', { minutes: 0, isSkipped: true }, asked)]
  }
  const endMs = marks.findLast((mark) => mark.kind === 'pull')?.atMs ?? toastMs
  if (endMs === null) return []
  const actual = minutes(bendMs, endMs)
  return actual >= asked - slackMin ? [] : [found('bend', 'Pull', { minutes: actual }, asked)]
}

/** Stages whose end was marked, the last one by the rest. One that ran on by the plan's minutes is as planned. */
function stages({ content, toastMs, restMs, endedMs, marks }: ShortStepFacts): Found[] {
  if (toastMs === null) return []
  const toastEndMs = restMs ?? endedMs
  const stageMarks = marks.flatMap((mark) =>
    mark.kind === 'stage' && mark.stagePosition !== null
      ? [{ stageIndex: mark.stagePosition, timeS: (mark.atMs - toastMs) / 1000 }]
      : [],
  )
  const matched = matchStages(
    content.stages,
    stageMarks.filter((mark) => mark.stageIndex < content.stages.length),
    toastEndMs === null ? openEndS : (toastEndMs - toastMs) / 1000,
  )
  return matched.flatMap((stage, index) => {
    const isCutByRest = toastEndMs !== null && toastMs + stage.endS * 1000 >= toastEndMs
    const isEnded = isCutByRest || matched[index + 1]?.isMarked === true
    const missing = stage.planMinutes - stage.actualMinutes
    const isShort = missing > Math.max(stageShortMin, stageShortShare * stage.planMinutes)
    if (!isEnded || !isShort) return []
    const actual = { minutes: stage.actualMinutes, isSkipped: stage.actualMinutes < slackMin }
    return [found('stage', stage.name, actual, stage.planMinutes, index + 1)]
  })
}

function rest({ content, toastMs, restMs, endedMs }: ShortStepFacts): Found[] {
  const asked = content.restMinutes
  if (endedMs === null || toastMs === null || asked === 0) return []
  if (restMs === null) return [found('rest', 'Rest', { minutes: 0, isSkipped: true }, asked)]
  const actual = minutes(restMs, endedMs)
  return actual >= asked - slackMin ? [] : [found('rest', 'Rest', { minutes: actual }, asked)]
}

function reasonOf({ marks }: ShortStepFacts, { step, stagePosition }: Found): string | null {
  const given = marks.findLast(
    (mark) => mark.kind === 'reason' && mark.step === step && mark.stagePosition === stagePosition,
  )
  return given?.words ?? null
}

/** The same of a firing as it is stored; none before it has begun, and none of one that was abandoned. */
export function shortStepsOf(firing: FiringDto): ShortStep[] {
  if (firing.recipeCopy === null || firing.preheatAt === null || firing.state === 'abandoned') return []
  const toMs = (at: string | null) => (at === null ? null : Date.parse(at))
  return shortSteps({
    content: firing.recipeCopy.content,
    preheatMs: Date.parse(firing.preheatAt),
    bendMs: toMs(firing.bendAt),
    toastMs: toMs(firing.toastAt),
    restMs: toMs(firing.restAt),
    endedMs: toMs(firing.endedAt),
    marks: firing.marks
      .filter((mark) => mark.isInForce)
      .map((mark) => ({ ...mark, atMs: Date.parse(mark.at) }))
      .sort((a, b) => a.atMs - b.atMs),
  })
}

/** "Preheat was 4:00 of 20 min", "The pull was left out; the recipe asks 10 min". */
export function shortStepWords(step: Omit<ShortStep, 'reason'>): string {
  const name = step.step === 'bend' ? 'The pull' : capitalize(step.name)
  const asked = `${Math.round(step.askedMinutes * 10) / 10} min`
  if (step.isSkipped) return `${name} was left out; the recipe asks ${asked}`
  return `${name} was ${clock(step.actualMinutes)} of ${asked}`
}

function clock(actualMinutes: number): string {
  const wholeS = Math.max(0, Math.floor(actualMinutes * 60))
  return `${Math.floor(wholeS / 60)}:${String(wholeS % 60).padStart(2, '0')}`
}

/** Reasons that one touch gives, for each step (common practice); any other words serve. */
export const usualReasons: Record<ShortStepKind, readonly string[]> = {
  preheat: ['Staves hot already', 'Wet enough', 'Fire too hot', 'Second firing', 'No time'],
  bend: ['Bent already', 'Wood gave easily', 'Stave cracked', 'Cable trouble', 'No time'],
  stage: ['Colour is there', 'Dose ahead', 'Too hot', 'Blistering', 'Fire failing'],
  rest: ['Cool enough', 'Hearth needed', 'End of the day', 'Joints looked at'],
}
