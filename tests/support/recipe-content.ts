import type { RecipeContent } from '@/lib/recipes/schema'

/** A whole and valid recipe, invented: warm, climb, hold, deepen on a 27 mm stave. */
export function sampleContent(changes: Partial<RecipeContent> = {}): RecipeContent {
  return {
    pieceKind: 'barrel',
    sizeAndShape: '225 L, Bordeaux shape',
    thicknessMm: 27,
    leadPlace: { height: 'bilge', side: 'A', depthMm: 2, mounting: 'wedge' },
    preheat: {
      moistureMinPercent: 18,
      moistureMaxPercent: 24,
      waterTempC: 70,
      method: 'spray',
      minutes: 12,
    },
    bend: { minimumMinutes: 10, woodLimitC: 130 },
    planStartTempC: 60,
    stages: [
      {
        name: 'Warm',
        kind: 'ramp',
        targetTempC: 150,
        coalsTargetTempC: null,
        minutes: 12,
        bandC: 7,
        lid: 'off',
        cues: [{ action: 'feed', minute: 6, words: '' }],
      },
      {
        name: 'Climb',
        kind: 'ramp',
        targetTempC: 184,
        coalsTargetTempC: 640,
        minutes: 9,
        bandC: 7,
        lid: 'off',
        cues: [],
      },
      {
        name: 'Hold',
        kind: 'hold',
        targetTempC: 184,
        coalsTargetTempC: null,
        minutes: 23,
        bandC: 7,
        lid: 'on',
        cues: [
          { action: 'lid on', minute: 0, words: '' },
          { action: 'feed', minute: 11, words: 'two billets' },
        ],
      },
    ],
    doseTargetMinutes: null,
    doseToleranceLog10: 0.12,
    limits: { woodMaximumC: 215, climbMaximumCPerMin: 12, spreadC: 8 },
    restMinutes: 10,
    flavourIntent: 'Round, with warm bread and little smoke.',
    notes: '',
    ...changes,
  }
}
