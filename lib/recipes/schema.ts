import * as z from 'zod'
import { leadHeights, leadMountings } from '@/lib/recipes/lead-places'

export { leadHeights, leadMountings }

export const pieceKinds = ['barrel', 'head'] as const
export const versionStates = ['draft', 'in review', 'approved', 'superseded', 'withdrawn'] as const
export const preheatMethods = ['spray', 'immersion', 'steam', 'none'] as const
export const cueActions = ['stir', 'feed', 'mist', 'lid on', 'lid off', 'turn', 'turn over', 'look'] as const
export const stageKinds = ['ramp', 'hold'] as const

/** A number within bounds, with the sentence that names both. */
function bounded(low: number, high: number, unit: string) {
  const sentence = `Give a number from ${low} to ${high}${unit === '' ? '' : ` ${unit}`}.`
  return z.number(sentence).min(low, sentence).max(high, sentence)
}

function words(low: number, high: number) {
  const sentence = low === 0 ? `At most ${high} letters.` : `Give ${low} to ${high} letters.`
  return z.string(sentence).trim().min(low, sentence).max(high, sentence)
}

export const cueSchema = z.strictObject({
  action: z.enum(cueActions, `Choose one of ${cueActions.join(', ')}.`),
  /** Minutes from the stage's start. */
  minute: bounded(0, 240, 'min'),
  words: words(0, 80).default(''),
})

export const stageSchema = z.strictObject({
  name: words(1, 40),
  kind: z.enum(stageKinds, 'Choose ramp or hold.'),
  /** Wood temperature at the lead probe's depth at the stage's end; a hold keeps the one before it. */
  targetTempC: bounded(0, 280, '°C'),
  coalsTargetTempC: bounded(0, 1100, '°C').nullable().default(null),
  minutes: bounded(0.5, 240, 'min'),
  bandC: bounded(0.5, 60, '°C'),
  lid: z.enum(['on', 'off'], 'Choose on or off.'),
  cues: z.array(cueSchema).max(12, 'At most 12 cues in a stage.').default([]),
})

export const leadPlaceSchema = z.strictObject({
  height: z.enum(leadHeights, `Choose one of ${leadHeights.join(', ')}.`),
  side: words(1, 20),
  depthMm: bounded(0, 60, 'mm'),
  mounting: z.enum(leadMountings, `Choose one of ${leadMountings.join(', ')}.`),
})

/** Everything that a recipe version says; temperatures in °C, times in minutes, depths in mm. */
const contentShape = z.strictObject({
  pieceKind: z.enum(pieceKinds, 'Choose barrel or head.').default('barrel'),
  sizeAndShape: words(1, 40),
  thicknessMm: bounded(10, 60, 'mm'),
  leadPlace: leadPlaceSchema,
  preheat: z.strictObject({
    moistureMinPercent: bounded(0, 60, '%'),
    moistureMaxPercent: bounded(0, 60, '%'),
    waterTempC: bounded(0, 100, '°C'),
    method: z.enum(preheatMethods, `Choose one of ${preheatMethods.join(', ')}.`),
    minutes: bounded(0, 240, 'min'),
  }),
  bend: z.strictObject({
    minimumMinutes: bounded(0, 120, 'min').default(10),
    woodLimitC: bounded(40, 260, '°C'),
  }),
  planStartTempC: bounded(-10, 260, '°C'),
  stages: z.array(stageSchema).min(1, 'Add at least one stage.').max(24, 'At most 24 stages.'),
  /** Minutes at the site's reference temperature; null takes the plan's own dose. */
  doseTargetMinutes: z
    .number()
    .positive('Give a dose above 0, or leave it out to take it from the plan.')
    .max(100_000, 'Give a dose up to 100,000 min.')
    .nullable()
    .default(null),
  doseToleranceLog10: bounded(0.01, 1, '').default(0.12),
  limits: z.strictObject({
    woodMaximumC: bounded(100, 300, '°C'),
    climbMaximumCPerMin: bounded(0.5, 60, '°C a minute'),
    spreadC: bounded(0.5, 60, '°C'),
  }),
  restMinutes: bounded(0, 240, 'min'),
  flavourIntent: words(0, 2000).default(''),
  notes: words(0, 4000).default(''),
})

export type RecipeContent = z.infer<typeof contentShape>
export type RecipeStage = z.infer<typeof stageSchema>
export type Cue = z.infer<typeof cueSchema>
export type LeadPlace = z.infer<typeof leadPlaceSchema>
export type VersionState = (typeof versionStates)[number]

/** What must hold between fields: one sentence beside the field that should change. */
function checkAcross(content: RecipeContent, context: z.RefinementCtx): void {
  const fault = (path: (string | number)[], message: string) =>
    context.addIssue({ code: 'custom', path, message })
  if (content.preheat.moistureMinPercent > content.preheat.moistureMaxPercent) {
    fault(['preheat', 'moistureMaxPercent'], 'The upper moisture is below the lower one.')
  }
  if (content.leadPlace.depthMm >= content.thicknessMm) {
    fault(['leadPlace', 'depthMm'], `The lead probe must sit inside the ${content.thicknessMm} mm of wood.`)
  }
  let reachedC = content.planStartTempC
  content.stages.forEach((stage, index) => {
    if (stage.kind === 'hold' && stage.targetTempC !== reachedC) {
      fault(
        ['stages', index, 'targetTempC'],
        `A hold keeps the ${reachedC} °C reached before it. Make it a ramp to change it.`,
      )
    }
    if (stage.targetTempC > content.limits.woodMaximumC) {
      fault(['stages', index, 'targetTempC'], `Above the wood maximum of ${content.limits.woodMaximumC} °C.`)
    }
    if (
      stage.kind === 'ramp' &&
      Math.abs(stage.targetTempC - reachedC) / stage.minutes > content.limits.climbMaximumCPerMin
    ) {
      fault(
        ['stages', index, 'minutes'],
        `Climbs faster than ${content.limits.climbMaximumCPerMin} °C a minute. Give it more time.`,
      )
    }
    stage.cues.forEach((cue, cueIndex) => {
      if (cue.minute > stage.minutes) {
        fault(['stages', index, 'cues', cueIndex, 'minute'], `After the stage's end at ${stage.minutes} min.`)
      }
    })
    reachedC = stage.targetTempC
  })
}

export const recipeContentSchema = contentShape.superRefine(checkAcross)

export const createRecipeSchema = z.strictObject({
  name: words(1, 80),
  customerId: z.uuid().nullable().default(null),
  content: recipeContentSchema,
})

export const createVersionSchema = z.strictObject({
  /** Left out: the approved version, else the latest. */
  fromVersionId: z.uuid('Name the version to start from.').nullish(),
  /** Left out: what the version it starts from says. */
  content: recipeContentSchema.optional(),
})

/** A revision that may be left out; given, it must be the server's. */
const seenRevision = z.number('Give the revision you saw.').int().positive().optional()
const password = z.string('Write your password again.').min(1, 'Write your password again.').max(200)

export const sendForReviewSchema = z.strictObject({ revision: seenRevision })

export const approveVersionSchema = z.strictObject({
  password,
  meaning: words(1, 200).default('I have checked this version and approve it for firing.'),
  /** Needed when the wood may go above 230 °C. */
  reason: words(0, 2000).optional(),
  revision: seenRevision,
})

export const returnVersionSchema = z.strictObject({
  reason: words(1, 2000),
  revision: seenRevision,
})

export const withdrawVersionSchema = z.strictObject({
  reason: words(1, 2000),
  password,
  meaning: words(1, 200).default('I withdraw this version: it may not be fired any more.'),
})

export const takeBackVersionSchema = z.strictObject({ revision: seenRevision })

export const updateVersionSchema = z.strictObject({
  /** The revision that the editor began from; a later one on the server answers 409 with both sides. */
  revision: z.number().int().positive(),
  content: recipeContentSchema,
})

export const signatureSchema = z.object({
  name: z.string(),
  role: z.string(),
  meaning: z.string(),
  reason: z.string().nullable(),
  signedAt: z.iso.datetime(),
})

/** A recipe version as it leaves the server. */
export const recipeVersionSchema = z.object({
  id: z.uuid(),
  recipeId: z.uuid(),
  recipeName: z.string(),
  number: z.number().int(),
  state: z.enum(versionStates),
  revision: z.number().int(),
  author: z.object({ id: z.uuid(), name: z.string() }),
  basedOnVersionId: z.uuid().nullable(),
  content: recipeContentSchema,
  /** Dose of the plan, minutes at the site's reference temperature. */
  planDoseMinutes: z.number(),
  /** The target that a firing is held to: the set one, or the plan's. */
  targetDoseMinutes: z.number(),
  totalMinutes: z.number(),
  createdAt: z.iso.datetime(),
  updatedAt: z.iso.datetime(),
  sentAt: z.iso.datetime().nullable(),
  approvedAt: z.iso.datetime().nullable(),
  approvedBy: z.string().nullable(),
  supersededAt: z.iso.datetime().nullable(),
  returnedAt: z.iso.datetime().nullable(),
  returnedBy: z.string().nullable(),
  returnReason: z.string().nullable(),
  withdrawnAt: z.iso.datetime().nullable(),
  withdrawnBy: z.string().nullable(),
  withdrawReason: z.string().nullable(),
  /** SHA-256 of the content's canonical JSON: what a signature of it carries. */
  contentSha256: z.string(),
  signatures: z.array(signatureSchema),
})

export type RecipeVersionDto = z.infer<typeof recipeVersionSchema>

/** A recipe as it stands in a list, with the latest version that the reader may see. */
export const recipeListItemSchema = z.object({
  id: z.uuid(),
  name: z.string(),
  customerId: z.uuid().nullable(),
  customerName: z.string().nullable(),
  createdAt: z.iso.datetime(),
  createdBy: z.string(),
  versionCount: z.number().int(),
  approvedVersion: z.object({ id: z.uuid(), number: z.number().int() }).nullable(),
  latestVersion: recipeVersionSchema,
})

export type RecipeListItem = z.infer<typeof recipeListItemSchema>

/** A recipe with every version that the reader may see, the newest first. */
export const recipeSchema = recipeListItemSchema.extend({ versions: z.array(recipeVersionSchema) })

export type RecipeDto = z.infer<typeof recipeSchema>

/** A withdrawn version, with what waits for it and must be given another. */
export const withdrawnVersionSchema = recipeVersionSchema.extend({
  touched: z.object({
    batches: z.array(z.object({ id: z.uuid(), number: z.number().int(), unfiredCount: z.number().int() })),
    queuedFirings: z.array(z.object({ id: z.uuid(), serial: z.string() })),
  }),
})

export type WithdrawnVersionDto = z.infer<typeof withdrawnVersionSchema>

export const recipeSorts = ['name', '-name', 'updated', '-updated'] as const

/** What a firing keeps for ever: the version as it was when preheat began. */
export const recipeCopySchema = z.strictObject({
  recipeId: z.uuid(),
  recipeName: z.string(),
  versionId: z.uuid(),
  versionNumber: z.number().int(),
  content: recipeContentSchema,
})

export type RecipeCopy = z.infer<typeof recipeCopySchema>
