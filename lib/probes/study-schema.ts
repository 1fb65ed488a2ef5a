import * as z from 'zod'
import { pageQuery, pageSchema } from '@/lib/http/cursor'
import { checkWays } from '@/lib/probes/schema'

const tempC = (words: string) => z.number(words).min(-50, 'From -50 °C.').max(400, 'Up to 400 °C.')
const password = z.string('Write your password again.').min(1, 'Write your password again.').max(200)
const meaning = z.string('Say what you sign.').trim().min(3, 'Say what you sign.').max(200)

export const studyStates = ['open', 'finished', 'abandoned'] as const

/** What n placements say; the shape of `repeatabilityOf`, with the z that it was made with. */
export const studyResultSchema = z.object({
  n: z.number().int(),
  meanC: z.number(),
  sdC: z.number(),
  halfWidthC: z.number(),
  halfWidthLowC: z.number(),
  halfWidthHighC: z.number(),
  halfWidthLog10: z.number(),
  halfWidthLowLog10: z.number(),
  halfWidthHighLog10: z.number(),
  zC: z.number(),
})
export type StudyResultDto = z.infer<typeof studyResultSchema>

export const placementSchema = z.object({
  id: z.uuid(),
  position: z.number().int(),
  placedTempC: z.number(),
  referenceTempC: z.number(),
  /** Placed minus reference, °C. */
  differenceC: z.number(),
  way: z.enum(checkWays),
  placedAt: z.iso.datetime(),
  placedBy: z.string(),
  /** Struck out: it does not count, and says why. */
  struck: z.object({ at: z.iso.datetime(), by: z.string(), reason: z.string() }).nullable(),
})
export type PlacementDto = z.infer<typeof placementSchema>

const probeRef = z.object({ id: z.uuid(), name: z.string(), isRetired: z.boolean() })

export const studySchema = z.object({
  id: z.uuid(),
  number: z.number().int(),
  probe: probeRef,
  reference: probeRef,
  place: z.object({ height: z.string(), side: z.string(), depthMm: z.number(), mounting: z.string() }),
  /** What was heated, and how. */
  heatWords: z.string(),
  state: z.enum(studyStates),
  startedAt: z.iso.datetime(),
  startedBy: z.string(),
  endedAt: z.iso.datetime().nullable(),
  endReason: z.string().nullable(),
  signedBy: z.string().nullable(),
  placements: z.array(placementSchema),
  /** Of an open study so far; null below five placements, or while all are alike. */
  result: studyResultSchema.nullable(),
  /** It became the site's figure with this version of the settings. */
  adopted: z.object({ at: z.iso.datetime(), by: z.string(), version: z.number().int() }).nullable(),
})
export type StudyDto = z.infer<typeof studySchema>
export const studyPageSchema = pageSchema(studySchema)
export const listStudiesQuery = z.strictObject({ ...pageQuery, state: z.enum(studyStates).optional() })

export const startStudySchema = z.strictObject({
  /** The probe that is placed again and again. */
  probeId: z.uuid('Choose the probe that is placed.'),
  /** The probe that stays where it is. */
  referenceProbeId: z.uuid('Choose the probe that stays.'),
  heatWords: z.string().trim().max(500, 'At most 500 letters.').default(''),
})

export const addPlacementSchema = z.strictObject({
  /** The client's own uuid: sending it again changes nothing. */
  id: z.uuid(),
  /** Read by eye; left out when `takenAt` takes both probes' own settled readings. */
  placedTempC: tempC('Give what the placed probe read.').optional(),
  referenceTempC: tempC('Give what the fixed probe read.').optional(),
  takenAt: z.iso.datetime({ offset: true, error: 'Give an instant.' }).optional(),
})

export const strikePlacementSchema = z.strictObject({
  reason: z.string('Say why.').trim().min(3, 'Say why in a few words.').max(500, 'At most 500 letters.'),
})

export const signStudySchema = z.strictObject({ password, meaning })
