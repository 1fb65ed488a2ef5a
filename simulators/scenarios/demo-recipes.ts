import type { Cue, RecipeContent, RecipeStage } from '@/lib/recipes/schema'

/** The demo's recipes: invented, as the cooperage and its customers are. Each entry is a recipe with its history. */
export type DemoRecipe = {
  name: string
  /** Index of the customer whose own toast it is, or null. */
  customer: number | null
  versions: {
    content: RecipeContent
    daysAgo: number
    fate: 'approved' | 'draft' | 'in review'
    reason: string
  }[]
}

type StageLine = [
  name: string,
  kind: 'ramp' | 'hold',
  toC: number,
  minutes: number,
  bandC: number,
  lid: 'on' | 'off',
  cues: Cue[],
]

const cue = (action: Cue['action'], minute: number, words = ''): Cue => ({ action, minute, words })

function stage([name, kind, targetTempC, minutes, bandC, lid, cues]: StageLine): RecipeStage {
  return { name, kind, targetTempC, coalsTargetTempC: null, minutes, bandC, lid, cues }
}

function barrel(lines: StageLine[], more: Partial<RecipeContent> = {}): RecipeContent {
  return {
    pieceKind: 'barrel',
    sizeAndShape: '225 l',
    thicknessMm: 27,
    leadPlace: { height: 'bilge', side: 'A', depthMm: 2, mounting: 'wedge' },
    preheat: { moistureMinPercent: 16, moistureMaxPercent: 24, waterTempC: 70, method: 'spray', minutes: 12 },
    bend: { minimumMinutes: 10, woodLimitC: 130 },
    planStartTempC: 60,
    stages: lines.map(stage),
    doseTargetMinutes: null,
    doseToleranceLog10: 0.12,
    limits: { woodMaximumC: 215, climbMaximumCPerMin: 22, spreadC: 8 },
    restMinutes: 8,
    flavourIntent: '',
    notes: '',
    ...more,
  }
}

const feed = (minute: number) => cue('feed', minute)
const stir = (minute: number) => cue('stir', minute)

/** The everyday toast; `holdC` and `holdMin` make its versions. */
function quayMedium(holdC: number, holdMin: number, endC: number): RecipeContent {
  return barrel(
    [
      ['Warm', 'ramp', 150, 12, 7, 'off', [feed(6)]],
      ['Climb', 'ramp', holdC, 8, 7, 'off', [stir(1)]],
      ['Hold', 'hold', holdC, holdMin, 7, 'off', [feed(4), feed(11), cue('lid on', holdMin)]],
      ['Deepen', 'ramp', endC, 7, 7, 'on', [cue('turn over', 0.5)]],
    ],
    { flavourIntent: 'Round, toasted bread and vanilla, little smoke.', notes: 'Demo recipe, invented.' },
  )
}

export const demoRecipes: DemoRecipe[] = [
  {
    name: 'Quay medium',
    customer: 0,
    versions: [
      { content: quayMedium(186, 16, 196), daysAgo: 196, fate: 'approved', reason: 'First written version.' },
      {
        content: quayMedium(187, 17, 197),
        daysAgo: 150,
        fate: 'approved',
        reason: 'A minute longer: batches ran light.',
      },
      { content: quayMedium(188, 17, 198), daysAgo: 104, fate: 'approved', reason: 'Slightly hotter hold.' },
      {
        content: quayMedium(188, 18, 198),
        daysAgo: 62,
        fate: 'approved',
        reason: 'Settled with the customer.',
      },
      { content: quayMedium(184, 23, 196), daysAgo: 3, fate: 'draft', reason: 'A little deeper, same dose.' },
    ],
  },
  {
    name: 'Lantern light',
    customer: 1,
    versions: [
      {
        content: barrel(
          [
            ['Warm', 'ramp', 140, 12, 7, 'off', [feed(5)]],
            ['Climb', 'ramp', 170, 8, 7, 'off', [stir(2)]],
            ['Hold', 'hold', 170, 12, 7, 'off', [feed(6)]],
          ],
          { flavourIntent: 'Fresh wood kept, a little coconut.', notes: 'Demo recipe, invented.' },
        ),
        daysAgo: 190,
        fate: 'approved',
        reason: 'First written version.',
      },
      {
        content: barrel(
          [
            ['Warm', 'ramp', 140, 12, 7, 'off', [feed(5)]],
            ['Climb', 'ramp', 172, 8, 7, 'off', [stir(2)]],
            ['Hold', 'hold', 172, 13, 7, 'off', [feed(6)]],
          ],
          { flavourIntent: 'Fresh wood kept, a little coconut.', notes: 'Demo recipe, invented.' },
        ),
        daysAgo: 88,
        fate: 'approved',
        reason: 'Two degrees more after tasting.',
      },
    ],
  },
  {
    name: 'Causeway medium plus',
    customer: 2,
    versions: [
      {
        content: barrel(
          [
            ['Warm', 'ramp', 150, 12, 7, 'off', [feed(6)]],
            ['Climb', 'ramp', 190, 9, 7, 'off', [stir(2)]],
            ['Hold', 'hold', 190, 20, 7, 'off', [feed(5), feed(13), cue('lid on', 19)]],
            ['Deepen', 'ramp', 202, 8, 7, 'on', [cue('turn over', 0.5)]],
          ],
          { flavourIntent: 'Spice and dark caramel.', notes: 'Demo recipe, invented.' },
        ),
        daysAgo: 180,
        fate: 'approved',
        reason: 'First written version.',
      },
      {
        content: barrel(
          [
            ['Warm', 'ramp', 150, 12, 7, 'off', [feed(6)]],
            ['Climb', 'ramp', 191, 9, 7, 'off', [stir(2)]],
            ['Hold', 'hold', 191, 20, 7, 'off', [feed(5), feed(13), cue('lid on', 19)]],
            ['Deepen', 'ramp', 203, 8, 7, 'on', [cue('turn over', 0.5)]],
          ],
          { flavourIntent: 'Spice and dark caramel.', notes: 'Demo recipe, invented.' },
        ),
        daysAgo: 95,
        fate: 'approved',
        reason: 'One degree more.',
      },
    ],
  },
  {
    name: 'Saltmarsh long',
    customer: null,
    versions: [
      {
        content: barrel(
          [
            ['Warm', 'ramp', 140, 14, 7, 'off', [feed(7)]],
            ['Climb', 'ramp', 175, 10, 7, 'off', [stir(3)]],
            ['Long hold', 'hold', 175, 38, 7, 'on', [feed(8), feed(18), feed(28)]],
          ],
          { flavourIntent: 'Low and long: sweet, deep, no smoke.', notes: 'Demo recipe, invented.' },
        ),
        daysAgo: 170,
        fate: 'approved',
        reason: 'First written version.',
      },
    ],
  },
  {
    name: 'Tern short',
    customer: null,
    versions: [
      {
        content: barrel(
          [
            ['Warm', 'ramp', 150, 11, 7, 'off', [feed(4)]],
            ['Rise', 'ramp', 204, 9, 8, 'off', [stir(1), feed(3)]],
            ['Short hold', 'hold', 204, 8, 8, 'off', [cue('turn', 4)]],
          ],
          {
            flavourIntent: 'High and short: roasted nut at the face, fresh wood behind.',
            notes: 'Demo recipe, invented.',
            limits: { woodMaximumC: 220, climbMaximumCPerMin: 22, spreadC: 9 },
          },
        ),
        daysAgo: 160,
        fate: 'approved',
        reason: 'First written version.',
      },
    ],
  },
  {
    name: 'Headland heavy',
    customer: 2,
    versions: [
      {
        content: barrel(
          [
            ['Warm', 'ramp', 150, 12, 7, 'off', [feed(5)]],
            ['Climb', 'ramp', 195, 9, 7, 'off', [stir(2)]],
            ['Hold', 'hold', 195, 22, 7, 'on', [feed(6), feed(15)]],
            ['Deepen', 'ramp', 208, 9, 7, 'on', [cue('turn over', 1)]],
          ],
          {
            flavourIntent: 'Smoke, clove, dark chocolate.',
            notes: 'Demo recipe, invented.',
            limits: { woodMaximumC: 222, climbMaximumCPerMin: 22, spreadC: 9 },
          },
        ),
        daysAgo: 140,
        fate: 'approved',
        reason: 'First written version.',
      },
    ],
  },
  {
    name: 'Sluice 300',
    customer: 1,
    versions: [
      {
        content: barrel(
          [
            ['Warm', 'ramp', 150, 13, 7, 'off', [feed(6)]],
            ['Climb', 'ramp', 186, 9, 7, 'off', [stir(2)]],
            ['Hold', 'hold', 186, 22, 7, 'off', [feed(6), feed(14)]],
          ],
          {
            sizeAndShape: '300 l',
            thicknessMm: 29,
            flavourIntent: 'As Quay medium, for the larger barrel.',
            notes: 'Demo recipe, invented.',
          },
        ),
        daysAgo: 120,
        fate: 'approved',
        reason: 'First written version.',
      },
    ],
  },
  {
    name: 'Estuary trial',
    customer: null,
    versions: [
      {
        content: barrel(
          [
            ['Warm', 'ramp', 145, 12, 7, 'off', [feed(6)]],
            ['Climb', 'ramp', 180, 9, 7, 'off', [stir(2)]],
            ['Hold', 'hold', 180, 26, 7, 'on', [feed(8), feed(17)]],
            ['Finish', 'ramp', 190, 5, 7, 'on', []],
          ],
          { flavourIntent: 'Between Quay medium and Saltmarsh long.', notes: 'Demo recipe, invented.' },
        ),
        daysAgo: 6,
        fate: 'in review',
        reason: 'To be agreed.',
      },
    ],
  },
]
