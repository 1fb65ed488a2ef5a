import { parseCues, printCues } from '@/lib/recipes/cue-text'
import type { PlannedContent } from '@/lib/recipes/plan-of'
import type { RecipeContent, RecipeStage } from '@/lib/recipes/schema'
import { recipeContentSchema } from '@/lib/recipes/schema'
import type { StavedContent } from '@/lib/recipes/stave-of'

/** Numbers that are being typed may be no number for a while; null stands for that. */
type Typed<T> = T extends number ? number | null : T extends object ? { [K in keyof T]: Typed<T[K]> } : T

/** A stage as it is edited: its cues are one typed line. `key` follows it when stages change places. */
export type DraftStage = Typed<Omit<RecipeStage, 'cues'>> & { key: number; cuesText: string }

/** A recipe's content as it is edited. Temperatures stay °C whatever the person's unit. */
export type Draft = Typed<Omit<RecipeContent, 'stages'>> & {
  stages: DraftStage[]
  /** Whether the dose target is the plan's own. */
  takesPlanDose: boolean
}

export type DraftErrors = Readonly<Record<string, string>>

export function toDraft(content: RecipeContent): Draft {
  return {
    ...content,
    takesPlanDose: content.doseTargetMinutes === null,
    stages: content.stages.map(({ cues, ...stage }, key) => ({ ...stage, key, cuesText: printCues(cues) })),
  }
}

/** The content if it is whole, else a sentence beside each field that is not: by the schema the server uses too. */
export function readDraft(
  draft: Draft,
): { content: RecipeContent; errors: null } | { content: null; errors: DraftErrors } {
  const errors: Record<string, string> = {}
  const { takesPlanDose, stages, ...rest } = draft
  const candidate = {
    ...rest,
    doseTargetMinutes: takesPlanDose ? null : draft.doseTargetMinutes,
    stages: stages.map(({ key: _key, cuesText, ...stage }, index) => {
      const parsed = parseCues(cuesText)
      if (parsed.fault !== null) errors[`stages.${index}.cues`] = parsed.fault
      return { ...stage, cues: parsed.cues ?? [] }
    }),
  }
  if (!takesPlanDose && draft.doseTargetMinutes === null) {
    errors['doseTargetMinutes'] = 'Give a dose above 0, or take the plan’s.'
  }
  const result = recipeContentSchema.safeParse(candidate)
  for (const issue of result.error?.issues ?? []) errors[fieldOf(issue.path)] ??= issue.message
  return result.success && Object.keys(errors).length === 0
    ? { content: result.data, errors: null }
    : { content: null, errors }
}

/** A cue's own field is the stage's line of cues. */
function fieldOf(path: readonly PropertyKey[]): string {
  return path
    .map(String)
    .join('.')
    .replace(/(\.cues)\..*$/, '$1')
}

/** A hold keeps the temperature that is reached before it: it follows when that changes. */
function followHolds(draft: Draft): Draft {
  let reachedC = draft.planStartTempC
  const stages = draft.stages.map((stage) => {
    const followed = stage.kind === 'hold' ? { ...stage, targetTempC: reachedC } : stage
    reachedC = followed.targetTempC
    return followed
  })
  return { ...draft, stages }
}

export function changeDraft(draft: Draft, changes: Partial<Draft>): Draft {
  return followHolds({ ...draft, ...changes })
}

/**
 * Changes a stage. Typing another temperature into a hold makes it a ramp, and the temperature before it makes it a
 * hold, so that the table needs no column for the kind.
 */
export function changeStage(draft: Draft, index: number, changes: Partial<DraftStage>): Draft {
  const beforeC = index === 0 ? draft.planStartTempC : (draft.stages[index - 1]?.targetTempC ?? null)
  const targetTempC = changes.targetTempC
  const kind = targetTempC === undefined ? {} : { kind: kindOf(targetTempC, beforeC) }
  const stages = draft.stages.map((stage, i) => (i === index ? { ...stage, ...changes, ...kind } : stage))
  return followHolds({ ...draft, stages })
}

function kindOf(targetTempC: number | null, beforeC: number | null): DraftStage['kind'] {
  return targetTempC === beforeC ? 'hold' : 'ramp'
}

/** A new hold after a stage, as long as a person would try first. */
export function addStage(draft: Draft, afterIndex: number): Draft {
  const before = draft.stages[afterIndex]
  const stage: DraftStage = {
    key: nextKey(draft),
    name: `Stage ${draft.stages.length + 1}`,
    kind: 'hold',
    targetTempC: before?.targetTempC ?? draft.planStartTempC,
    coalsTargetTempC: null,
    minutes: 5,
    bandC: before?.bandC ?? 7,
    lid: before?.lid ?? 'off',
    cuesText: '',
  }
  return followHolds({ ...draft, stages: draft.stages.toSpliced(afterIndex + 1, 0, stage) })
}

export function nextKey(draft: Draft): number {
  return Math.max(-1, ...draft.stages.map((stage) => stage.key)) + 1
}

export function removeStage(draft: Draft, index: number): Draft {
  return followHolds({ ...draft, stages: draft.stages.toSpliced(index, 1) })
}

/** Moves a stage up (−1) or down (+1); at the end of the table nothing happens. */
export function moveStage(draft: Draft, index: number, by: -1 | 1): Draft {
  const stage = draft.stages[index]
  const to = index + by
  if (stage === undefined || to < 0 || to >= draft.stages.length) return draft
  return followHolds({ ...draft, stages: draft.stages.toSpliced(index, 1).toSpliced(to, 0, stage) })
}

/** A plan's corner was dragged: the stage that ends there takes its temperature and length. */
export function dragPoint(draft: Draft, point: { pointIndex: number; timeS: number; tempC: number }): Draft {
  if (point.pointIndex === 0) return changeDraft(draft, { planStartTempC: point.tempC })
  const index = point.pointIndex - 1
  const startMin = draft.stages.slice(0, index).reduce((sum, stage) => sum + (stage.minutes ?? 0), 0)
  const minutes = Math.max(0.5, Math.round((point.timeS / 60 - startMin) * 10) / 10)
  return changeStage(draft, index, { targetTempC: point.tempC, minutes })
}

/** What the picture needs, or null while a number that it needs is missing. */
export function drawable(draft: Draft): (PlannedContent & StavedContent) | null {
  const { planStartTempC, thicknessMm, doseToleranceLog10 } = draft
  const depthMm = draft.leadPlace.depthMm
  const { moistureMinPercent, moistureMaxPercent } = draft.preheat
  if (planStartTempC === null || thicknessMm === null || doseToleranceLog10 === null) return null
  if (depthMm === null || moistureMinPercent === null || moistureMaxPercent === null) return null
  const stages = draft.stages.flatMap((stage) => {
    const { targetTempC, minutes, bandC } = stage
    if (targetTempC === null || minutes === null || bandC === null) return []
    if (targetTempC > 400 || targetTempC < -20 || minutes <= 0 || minutes > 600 || bandC < 0) return []
    return [{ name: stage.name, kind: stage.kind, targetTempC, minutes, bandC }]
  })
  const isWhole =
    stages.length > 0 &&
    stages.length === draft.stages.length &&
    thicknessMm >= 5 &&
    thicknessMm <= 100 &&
    depthMm >= 0 &&
    depthMm < thicknessMm &&
    moistureMinPercent >= 0 &&
    moistureMaxPercent <= 100
  if (!isWhole) return null
  const doseTargetMinutes = draft.takesPlanDose ? null : draft.doseTargetMinutes
  return {
    planStartTempC,
    stages,
    doseTargetMinutes: doseTargetMinutes !== null && doseTargetMinutes > 0 ? doseTargetMinutes : null,
    doseToleranceLog10,
    thicknessMm,
    leadPlace: { depthMm },
    preheat: { moistureMinPercent, moistureMaxPercent },
  }
}
