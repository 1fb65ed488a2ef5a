import * as z from 'zod'
import { leadPlaceSchema } from '@/lib/recipes/schema'
import { assayUnitNames } from '@/lib/science/formula-units'
import { formulaLimits } from '@/lib/science/formula-text'
import { familyIds } from '@/lib/science/marker-families'

function words(low: number, high: number, what: string) {
  const sentence = low === 0 ? `At most ${high} letters.` : `${what} At most ${high} letters.`
  return z.string(sentence).trim().min(low, sentence).max(high, sentence)
}

function depthMm(what: string) {
  const sentence = `Give ${what} from 0 to 60 mm.`
  return z.number(sentence).min(0, sentence).max(60, sentence)
}

const unitSchema = z.enum(assayUnitNames, `Choose one of ${assayUnitNames.join(', ')}.`)
const note = words(0, 1000, '').default('')
/** The number of the response that was in force when the editor began, 0 for none; a later one answers 409. */
const seenNumber = z.number('Give the number of the response you saw, 0 for none.').int().min(0)

const formulaText = z
  .string('Write a formula.')
  .max(formulaLimits.letters, `A formula has at most ${formulaLimits.letters} letters.`)

export const checkFormulaSchema = z.strictObject({ formula: formulaText, unit: unitSchema })
export const saveFormulaSchema = z.strictObject({ formula: formulaText, unit: unitSchema, note, seenNumber })

/** Most results of one fit. */
export const mostResults = 300

const fitShape = z.strictObject({
  family: z.enum(familyIds, 'Choose the shape of the response.'),
  unit: unitSchema,
  matrix: words(1, 80, 'Say what was assayed: toasted oak, model wine extract.'),
  extraction: words(1, 120, 'Say how it was extracted: solvent, ratio, days.'),
  samplePosition: words(1, 80, 'Say where the sample was taken: bilge, stave 7.'),
  sampleFromMm: depthMm('the depth at which the sample begins,'),
  sampleToMm: depthMm('the depth at which the sample ends,'),
  /** Where the lead probe sat when the doses were read. */
  place: leadPlaceSchema,
  /** Rows as pasted from a spreadsheet: barrel serial or dose in minutes, then the result. */
  rows: z.string('Paste the results.').max(20_000, 'At most 20,000 letters. Fit fewer results at once.'),
})

function checkDepths(input: { sampleFromMm: number; sampleToMm: number }, context: z.RefinementCtx): void {
  if (input.sampleFromMm <= input.sampleToMm) return
  context.addIssue({ code: 'custom', path: ['sampleToMm'], message: 'The sample ends before it begins.' })
}

export const previewFitSchema = fitShape.superRefine(checkDepths)
export const fitMarkerSchema = fitShape.extend({ note, seenNumber }).superRefine(checkDepths)

export type FitInput = z.infer<typeof previewFitSchema>

export const formulaFaultSchema = z.object({
  message: z.string(),
  /** Of the fault in the text, 0-based. */
  index: z.int(),
  length: z.int(),
})

/** What a formula gives for one approved recipe: a value, or why it has none. */
export const formulaExampleSchema = z.object({
  versionId: z.uuid(),
  recipeName: z.string(),
  versionNumber: z.int(),
  value: z.number().nullable(),
  reason: z.string().nullable(),
})

export const checkedFormulaSchema = z.discriminatedUnion('ok', [
  z.object({ ok: z.literal(false), fault: formulaFaultSchema }),
  z.object({
    ok: z.literal(true),
    /** In its plain form. */
    formula: z.string(),
    unit: unitSchema,
    /** It gives a number without a unit, which is read as one of `unit`. */
    isPureNumber: z.boolean(),
    examples: z.array(formulaExampleSchema),
  }),
])
export type CheckedFormula = z.infer<typeof checkedFormulaSchema>
export type FormulaExample = z.infer<typeof formulaExampleSchema>

/** One result with what its toast was; predictors that are not known are null. */
export const fitResultSchema = z.object({
  /** Which line of the pasted text, from 1. */
  line: z.int(),
  /** Both cells as typed. */
  typedSource: z.string(),
  typedValue: z.string(),
  serial: z.string().nullable(),
  firingId: z.uuid().nullable(),
  doseMin: z.number().nullable(),
  slowIndexMin: z.number().nullable(),
  fastIndexMin: z.number().nullable(),
  toastDepthMm: z.number().nullable(),
  /** The result, or the limit that it lies below. */
  value: z.number(),
  isBelowLimit: z.boolean(),
})
export type FitResult = z.infer<typeof fitResultSchema>

/** A row of the preview: a result, or what is wrong with the row and how to mend it. */
export const previewRowSchema = z.object({
  line: z.int(),
  typedSource: z.string(),
  typedValue: z.string(),
  result: fitResultSchema.nullable(),
  error: z.string().nullable(),
})
export type PreviewRow = z.infer<typeof previewRowSchema>

/** A fit as `lib/science/marker-fit` makes it. */
export const markerFitSchema = z.object({
  family: z.enum(familyIds),
  method: z.enum(['least squares', 'maximum likelihood']),
  confidence: z.number(),
  count: z.int(),
  belowLimitCount: z.int(),
  degreesOfFreedom: z.number(),
  parameters: z.array(
    z.object({
      name: z.string(),
      value: z.number(),
      standardError: z.number(),
      low: z.number(),
      high: z.number(),
    }),
  ),
  covariance: z.array(z.array(z.number())),
  residualSd: z.number(),
  ranges: z.array(
    z.object({
      key: z.enum(['doseMin', 'slowIndexMin', 'fastIndexMin', 'toastDepthMm']),
      low: z.number(),
      high: z.number(),
    }),
  ),
  mostLeverage: z.number(),
  residuals: z.array(z.object({ fitted: z.number(), residual: z.number().nullable() })),
})

/** The fitted curve over the range of one predictor, with the prediction interval; empty for two predictors. */
export const fitCurveSchema = z.array(
  z.object({ x: z.number(), value: z.number(), low: z.number(), high: z.number() }),
)
export type FitCurve = z.infer<typeof fitCurveSchema>

export const fitPictureSchema = z.object({
  fit: markerFitSchema,
  results: z.array(fitResultSchema),
  curve: fitCurveSchema,
})
export type FitPicture = z.infer<typeof fitPictureSchema>

export const fitPreviewSchema = z.object({
  rows: z.array(previewRowSchema),
  /** Null while a row has an error. */
  outcome: z
    .discriminatedUnion('ok', [
      z.object({ ok: z.literal(true), picture: fitPictureSchema }),
      z.object({ ok: z.literal(false), refusal: z.string() }),
    ])
    .nullable(),
})
export type FitPreview = z.infer<typeof fitPreviewSchema>

const responseBase = {
  id: z.uuid(),
  number: z.int(),
  unit: unitSchema,
  note: z.string(),
  author: z.string(),
  createdAt: z.iso.datetime(),
}

export const markerResponseSchema = z.discriminatedUnion('kind', [
  z.object({ ...responseBase, kind: z.literal('formula'), formula: z.string() }),
  z.object({
    ...responseBase,
    kind: z.literal('fit'),
    picture: fitPictureSchema,
    matrix: z.string(),
    extraction: z.string(),
    samplePosition: z.string(),
    sampleFromMm: z.number(),
    sampleToMm: z.number(),
    place: leadPlaceSchema,
    siteSettingsVersion: z.int(),
  }),
])
export type MarkerResponseDto = z.infer<typeof markerResponseSchema>

export const markerSchema = z.object({
  id: z.uuid(),
  key: z.string(),
  name: z.string(),
  unit: unitSchema,
  /** The response in force: the newest. */
  response: markerResponseSchema.nullable(),
})
export type MarkerDto = z.infer<typeof markerSchema>
export const markerListSchema = z.object({ items: z.array(markerSchema), nextCursor: z.null() })

export const markerDetailSchema = markerSchema.extend({
  /** Every response, the newest first. */
  responses: z.array(markerResponseSchema),
})
export type MarkerDetail = z.infer<typeof markerDetailSchema>

/** Assays of a lot before the fire by marker key, for formulas that use them: "vanillin:2.1,eugenol:0.4". */
export const predictMarkersQuery = z.strictObject({
  lot: z
    .string()
    .max(400)
    .regex(/^([a-z][a-z0-9_]*:\d+(\.\d+)?(,|$))*$/, 'Write lot assays as vanillin:2.1,eugenol:0.4.')
    .default(''),
})

export const markerPredictionSchema = z.object({
  marker: z.object({ id: z.uuid(), key: z.string(), name: z.string() }),
  unit: unitSchema,
  kind: z.enum(['formula', 'fit']),
  number: z.int(),
  /** Null when refused. */
  value: z.number().nullable(),
  /** Where a further barrel would lie, 95 %; null for a formula, which has no data behind it. */
  interval: z.object({ low: z.number(), high: z.number() }).nullable(),
  /** Why there is no value. */
  refusal: z.string().nullable(),
  /** What the value rests on, in words. */
  restsOn: z.string(),
})
export type MarkerPredictionDto = z.infer<typeof markerPredictionSchema>

export const versionMarkersSchema = z.object({
  predictions: z.array(markerPredictionSchema),
  /** Names of markers without a response. */
  without: z.array(z.string()),
  /** Lot assays that formulas ask for. */
  lotAssays: z.array(z.object({ key: z.string(), name: z.string(), unit: unitSchema })),
})
export type VersionMarkers = z.infer<typeof versionMarkersSchema>

const place = z.coerce.number().int().min(1).optional()

/** Of a marker's page: which part of it, which response is looked at, and which one an editor begins from. */
export const markerPageQuery = z.strictObject({
  view: z.enum(['response', 'formula', 'fit', 'earlier']).default('response'),
  number: place,
  from: place,
})
export type MarkerPageView = z.infer<typeof markerPageQuery>['view']
