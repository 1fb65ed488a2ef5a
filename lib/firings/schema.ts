import * as z from 'zod'
import { pageQuery, pageSchema } from '@/lib/http/cursor'
import { firingStates, probeRoles } from '@/lib/live/events'
import { pieceKinds, recipeCopySchema } from '@/lib/recipes/schema'

export const markKinds = [
  'phase',
  'stage',
  'pull',
  'stir',
  'feed',
  'mist',
  'lid on',
  'lid off',
  'turn',
  'turn over',
  'call',
  'note',
  'swap',
  'undone',
  'reason',
  'advice',
  'move',
] as const
export type MarkKind = (typeof markKinds)[number]
/** Marks that hands make; a move is made by moving the firing. */
export type HandMarkKind = Exclude<MarkKind, 'move'>
export const handMarkKinds = markKinds.filter((kind) => kind !== 'move')
/** What a reason is given for: a step that was skipped or short. */
export const shortStepKinds = ['preheat', 'bend', 'stage', 'rest'] as const
/** What a person did with a piece of advice; the app itself does nothing with it. */
export const adviceAnswers = ['taken', 'not now'] as const
export const phases = ['preheating', 'bending', 'toasting', 'resting'] as const
export const calls = ['early', 'right', 'late'] as const
export const verdicts = [
  'in tolerance',
  'cannot tell',
  'out of tolerance',
  'limit broken',
  'incomplete',
] as const
export const moistureMethods = ['oven-dry', 'meter'] as const

const instant = z.iso.datetime({ offset: true, error: 'Give an instant such as 2027-02-01T13:41:00Z.' })

export const overrideSchema = z.strictObject({
  password: z.string().min(1, 'Give your password.').max(200),
  reason: z.string().trim().min(3, 'Say why in a few words.').max(1000, 'At most 1,000 letters.'),
})

export const startFiringSchema = z.strictObject({
  /** The barrel or head. */
  pieceId: z.uuid('Choose a barrel.'),
  hearthId: z.uuid('Choose a hearth.'),
  moisturePercent: z.number().min(0, 'From 0 %.').max(80, 'Up to 80 %.').nullable().default(null),
  moistureMethod: z.enum(moistureMethods, 'Choose oven-dry or meter.').nullable().default(null),
  /** Left out: the hearth's usual probes. */
  probes: z
    .strictObject({
      lead: z.uuid(),
      opposite: z.uuid().nullable().default(null),
      coals: z.uuid().nullable().default(null),
    })
    .optional(),
  /** Of the water that is used; left out: the source that was checked last. */
  waterSource: z.string().trim().max(80, 'At most 80 letters.').optional(),
  isTrial: z.boolean().default(false),
  /** The person has gone through the start list. */
  isStartListDone: z.boolean().default(false),
  /** A signed override of water or probe checks that are out of date. */
  override: overrideSchema.optional(),
  /** Left out: now. At most 10 minutes ago. */
  at: instant.optional(),
})

export const addMarkSchema = z.strictObject({
  /** The client's own uuid: sending the mark again changes nothing. */
  id: z.uuid(),
  kind: z.enum(handMarkKinds, `Choose one of ${handMarkKinds.join(', ')}.`),
  at: instant,
  phase: z.enum(phases, `Choose one of ${phases.join(', ')}.`).optional(),
  /** The stage that ended (kind stage) or that the call is about; counts from 1. */
  stagePosition: z.number().int().min(1).max(24).optional(),
  call: z.enum(calls, 'Choose early, right or late.').optional(),
  words: z.string().trim().max(500, 'At most 500 letters.').default(''),
  /** For a swap: whose place is taken, by which probe, and whether that sits in the very same place. */
  role: z.enum(probeRoles, 'Choose lead, opposite or coals.').optional(),
  probeId: z.uuid('Choose a probe.').optional(),
  isAtSamePlace: z.boolean().optional(),
  /** For a reason: the step that was skipped or short; a stage with its position. The words are the reason. */
  step: z.enum(shortStepKinds, `Choose one of ${shortStepKinds.join(', ')}.`).optional(),
  /** For advice: what was done with it. The words are the advice as it stood. */
  answer: z.enum(adviceAnswers, 'Choose taken or not now.').optional(),
  replacesId: z.uuid().optional(),
  /** Who made it, as the tablet knows it; it waits there while somebody else is signed in. */
  authorId: z.uuid().optional(),
})

export const moveFiringSchema = z.strictObject({
  hearthId: z.uuid('Choose a hearth.'),
  /** Left out: the new hearth's usual probes. */
  probes: startFiringSchema.shape.probes,
  /** A signed override of checks of the new lead probe that are out of date. */
  override: overrideSchema.optional(),
  /** Left out: now. */
  at: instant.optional(),
})

export const finishFiringSchema = z.strictObject({
  at: instant.optional(),
  colour: z.string().trim().max(80, 'At most 80 letters.').nullable().default(null),
  smell: z.string().trim().max(80, 'At most 80 letters.').nullable().default(null),
  outsideTempC: z.number().min(-20, 'From -20 °C.').max(300, 'Up to 300 °C.').nullable().default(null),
  remarks: z.string().trim().max(4000, 'At most 4,000 letters.').default(''),
})

export const abandonFiringSchema = z.strictObject({
  reason: z.string('Say why.').trim().min(3, 'Say why in a few words.').max(1000, 'At most 1,000 letters.'),
  at: instant.optional(),
})

export const markSchema = z.object({
  id: z.uuid(),
  kind: z.enum(markKinds),
  at: z.iso.datetime(),
  recordedAt: z.iso.datetime(),
  by: z.string(),
  phase: z.enum(phases).nullable(),
  stagePosition: z.number().int().nullable(),
  call: z.enum(calls).nullable(),
  words: z.string(),
  step: z.enum(shortStepKinds).nullable(),
  answer: z.enum(adviceAnswers).nullable(),
  replacesId: z.uuid().nullable(),
  /** False when a later mark replaced or undid it. */
  isInForce: z.boolean(),
})
export type MarkDto = z.infer<typeof markSchema>

export const firingProbeSchema = z.object({
  probeId: z.uuid(),
  name: z.string(),
  role: z.enum(probeRoles),
  thermocoupleType: z.enum(['K', 'N', 'J', 'T']),
  iecClass: z.number().int(),
  height: z.string(),
  side: z.string(),
  depthMm: z.number(),
  mounting: z.string(),
  fromAt: z.iso.datetime(),
  untilAt: z.iso.datetime().nullable(),
})

export const firingSummarySchema = z.object({
  id: z.uuid(),
  state: z.enum(firingStates),
  piece: z.object({ id: z.uuid(), kind: z.enum(pieceKinds), serial: z.string(), position: z.number().int() }),
  batch: z.object({
    id: z.uuid(),
    number: z.number().int(),
    pieceCount: z.number().int(),
    woodLot: z.string(),
    customerName: z.string(),
  }),
  recipe: z.object({ id: z.uuid(), name: z.string(), versionId: z.uuid(), versionNumber: z.number().int() }),
  hearthNumber: z.number().int().nullable(),
  toaster: z.object({ id: z.uuid(), name: z.string() }).nullable(),
  isTrial: z.boolean(),
  isImported: z.boolean(),
  isFirstOfDay: z.boolean(),
  queuedAt: z.iso.datetime(),
  preheatAt: z.iso.datetime().nullable(),
  bendAt: z.iso.datetime().nullable(),
  toastAt: z.iso.datetime().nullable(),
  restAt: z.iso.datetime().nullable(),
  endedAt: z.iso.datetime().nullable(),
  endReason: z.string().nullable(),
  score: z
    .object({
      verdict: z.enum(verdicts),
      points: z.number().nullable(),
      doseMinutes: z.number().nullable(),
      doseLowMinutes: z.number().nullable(),
      doseHighMinutes: z.number().nullable(),
      planDoseMinutes: z.number(),
      toastDepthMm: z.number().nullable(),
      /** A small curve and wood picture for lists. */
      sketch: z.unknown(),
    })
    .nullable(),
})
export type FiringSummary = z.infer<typeof firingSummarySchema>

export const firingSchema = firingSummarySchema.extend({
  revision: z.number().int(),
  recipeCopy: recipeCopySchema.nullable(),
  recipeSha256: z.string().nullable(),
  siteSettingsVersion: z.number().int().nullable(),
  moisturePercent: z.number().nullable(),
  moistureMethod: z.enum(moistureMethods).nullable(),
  colour: z.string().nullable(),
  smell: z.string().nullable(),
  outsideTempC: z.number().nullable(),
  remarks: z.string(),
  probes: z.array(firingProbeSchema),
  marks: z.array(markSchema),
})
export type FiringDto = z.infer<typeof firingSchema>

export const firingPageSchema = pageSchema(firingSummarySchema)

export const listFiringsQuery = z.strictObject({
  ...pageQuery,
  q: z.string().trim().max(80).optional(),
  /** One state, or live (preheating to resting), or fired (finished and abandoned). */
  state: z.enum([...firingStates, 'live', 'fired', 'all']).default('all'),
  verdict: z.enum(verdicts).optional(),
  hearth: z.coerce.number().int().min(1).max(99).optional(),
  recipeId: z.uuid().optional(),
  versionId: z.uuid().optional(),
  batchId: z.uuid().optional(),
  pieceId: z.uuid().optional(),
  toasterId: z.uuid().optional(),
  from: z.iso.date('Write the date as 2027-02-01.').optional(),
  to: z.iso.date('Write the date as 2027-02-01.').optional(),
})

export const readingsQuery = z.strictObject({
  from: instant.optional(),
  to: instant.optional(),
  /** At most so many points a probe, extremes kept; left out: all. */
  points: z.coerce.number().int().min(10, 'At least 10.').max(50_000, 'At most 50,000.').optional(),
})

export const firingReadingsSchema = z.object({
  firingId: z.uuid(),
  /** Instant of toast start, or of preheat when there is no toast yet; times are seconds from it. */
  zeroAt: z.iso.datetime(),
  isSealed: z.boolean(),
  series: z.array(
    z.object({
      role: z.enum(probeRoles),
      probeId: z.uuid(),
      name: z.string(),
      readingCount: z.number().int(),
      timeS: z.array(z.number()),
      /** null: no reading. */
      tempC: z.array(z.number().nullable()),
    }),
  ),
})

/** What the last firings like the next one had in common. */
export const nextPieceLineSchema = z.object({
  what: z.enum(['minutes to temperature', 'dose log10']),
  n: z.number().int(),
  /** Median with its interval: minutes late (above 0) or early, or log10 of dose against the target. */
  value: z.number(),
  low: z.number(),
  high: z.number(),
  /** For minutes: to this temperature, °C. */
  tempC: z.number().nullable(),
  /** Of this lot only; of first fires only, or of later ones. */
  isSameLot: z.boolean(),
  isSameFirst: z.boolean(),
  isFirstOfDay: z.boolean(),
})
export type NextPieceLine = z.infer<typeof nextPieceLineSchema>

export const forecastRecordSchema = z.object({
  n: z.number().int(),
  rightCount: z.number().int(),
  withinMinutes: z.number(),
  /** Exact 95 % interval of the share. */
  shareLow: z.number(),
  shareHigh: z.number(),
})
export type ForecastRecordDto = z.infer<typeof forecastRecordSchema>

export const scoreSchema = z.object({
  firingId: z.uuid(),
  number: z.number().int(),
  ruleset: z.number().int(),
  siteSettingsVersion: z.number().int(),
  sealRevision: z.number().int(),
  computedAt: z.iso.datetime(),
  verdict: z.enum(verdicts),
  points: z.number().nullable(),
  doseMinutes: z.number().nullable(),
  doseLowMinutes: z.number().nullable(),
  doseHighMinutes: z.number().nullable(),
  planDoseMinutes: z.number(),
  deltaLog10Dose: z.number().nullable(),
  toastDepthMm: z.number().nullable(),
  /** The whole of the score as lib/science/score-types.ts says. */
  result: z.unknown(),
})
