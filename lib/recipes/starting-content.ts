import type { RecipeContent, RecipeStage } from '@/lib/recipes/schema'
import { defaultSiteRules } from '@/lib/science/site-rules'

/**
 * Where a new recipe may begin. Lengths are those of the usual toasts, which sources give differently (common
 * practice: light about 30 min, medium 35 to 45, medium plus 45 to 50, heavy 45 to 60); temperatures at 2 mm are ours,
 * to be changed at once.
 */
export const usualToasts = ['light', 'medium', 'medium plus', 'heavy'] as const
export type UsualToast = (typeof usualToasts)[number]

const courses: Record<
  UsualToast,
  { climbToC: number; holdMin: number; deepenToC: number; deepenMin: number }
> = {
  light: { climbToC: 165, holdMin: 8, deepenToC: 165, deepenMin: 0 },
  medium: { climbToC: 182, holdMin: 18, deepenToC: 182, deepenMin: 0 },
  'medium plus': { climbToC: 184, holdMin: 20, deepenToC: 194, deepenMin: 6 },
  heavy: { climbToC: 196, holdMin: 22, deepenToC: 210, deepenMin: 8 },
}

function stage(name: string, kind: 'ramp' | 'hold', targetTempC: number, minutes: number): RecipeStage {
  return { name, kind, targetTempC, coalsTargetTempC: null, minutes, bandC: 7, lid: 'off', cues: [] }
}

/** A whole, valid content to begin a recipe from: a barrel of 225 L or its head. */
export function startingContent(
  toast: UsualToast,
  pieceKind: RecipeContent['pieceKind'],
  rules: { doseToleranceLog10: number; bendMin: number } = defaultSiteRules,
): RecipeContent {
  const { climbToC, holdMin, deepenToC, deepenMin } = courses[toast]
  const isBarrel = pieceKind === 'barrel'
  return {
    pieceKind,
    sizeAndShape: isBarrel ? '225 L, Bordeaux shape' : 'Head for 225 L',
    thicknessMm: isBarrel ? 27 : 25,
    leadPlace: { height: isBarrel ? 'bilge' : 'head', side: 'A', depthMm: 2, mounting: 'wedge' },
    preheat: { moistureMinPercent: 16, moistureMaxPercent: 22, waterTempC: 70, method: 'spray', minutes: 12 },
    bend: { minimumMinutes: rules.bendMin, woodLimitC: 130 },
    planStartTempC: 60,
    stages: [
      { ...stage('Warm', 'ramp', 150, 12), cues: [{ action: 'feed', minute: 6, words: '' }] },
      { ...stage('Climb', 'ramp', climbToC, 10), cues: [{ action: 'stir', minute: 0, words: '' }] },
      {
        ...stage('Hold', 'hold', climbToC, holdMin),
        cues: [{ action: 'feed', minute: Math.floor(holdMin / 2), words: '' }],
      },
      ...(deepenMin === 0
        ? []
        : [
            {
              ...stage('Deepen', 'ramp', deepenToC, deepenMin),
              lid: 'on' as const,
              cues: [{ action: 'turn over' as const, minute: 0, words: '' }],
            },
          ]),
    ],
    doseTargetMinutes: null,
    doseToleranceLog10: rules.doseToleranceLog10,
    limits: { woodMaximumC: Math.max(215, deepenToC + 10), climbMaximumCPerMin: 12, spreadC: 8 },
    restMinutes: 10,
    flavourIntent: '',
    notes: '',
  }
}
