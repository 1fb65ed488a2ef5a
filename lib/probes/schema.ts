import * as z from 'zod'
import { pageQuery, pageSchema } from '@/lib/http/cursor'
import { liveStates } from '@/lib/live/events'

export const thermocoupleTypes = ['K', 'N', 'J', 'T'] as const
export const usualRoles = ['lead', 'opposite', 'coals', 'spare'] as const
export const probeHeights = ['bilge', 'quarter', 'head end', 'head', 'coals'] as const
export const probeMountings = ['wedge', 'drilled', 'clamped', 'hung'] as const
export const checkKinds = ['ice', 'boiling', 'block'] as const

export const hearthSchema = z.object({
  id: z.uuid(),
  number: z.number().int(),
  name: z.string(),
  isActive: z.boolean(),
  /** The firing that stands here now, or null. */
  live: z
    .object({
      firingId: z.uuid(),
      state: z.enum(liveStates),
      serial: z.string(),
      recipeName: z.string(),
      versionNumber: z.number().int(),
      toasterName: z.string(),
    })
    .nullable(),
  probes: z.array(z.object({ id: z.uuid(), name: z.string(), usualRole: z.enum(usualRoles) })),
})
export type HearthDto = z.infer<typeof hearthSchema>
export const hearthListSchema = z.object({ items: z.array(hearthSchema), nextCursor: z.null() })

const hearthFields = {
  number: z.number('Give a number.').int('Give a whole number.').min(1, 'From 1.').max(99, 'Up to 99.'),
  name: z.string().trim().max(60, 'At most 60 letters.').default(''),
  isActive: z.boolean().default(true),
}
export const saveHearthSchema = z.strictObject(hearthFields)

export const gatewaySchema = z.object({
  id: z.uuid(),
  name: z.string(),
  mayReplay: z.boolean(),
  clockOffsetMs: z.number().nullable(),
  lastSeenAt: z.iso.datetime().nullable(),
  tokenCount: z.number().int(),
  probeCount: z.number().int(),
  refusedCount: z.number().int(),
})
export type GatewayDto = z.infer<typeof gatewaySchema>
export const gatewayListSchema = z.object({ items: z.array(gatewaySchema), nextCursor: z.null() })

export const saveGatewaySchema = z.strictObject({
  name: z.string('Give a name.').trim().min(1, 'Give a name.').max(60, 'At most 60 letters.'),
  /** May send past instants: only for imports, seeds and tests. */
  mayReplay: z.boolean().default(false),
})

export const probeCheckSchema = z.object({
  id: z.uuid(),
  kind: z.enum(checkKinds),
  referenceTempC: z.number(),
  measuredTempC: z.number(),
  correctionC: z.number(),
  uncertaintyC: z.number(),
  stationPressureHpa: z.number().nullable(),
  checkedAt: z.iso.datetime(),
  dueAt: z.iso.datetime(),
  checkedBy: z.string(),
})
export type ProbeCheckDto = z.infer<typeof probeCheckSchema>

export const probeSchema = z.object({
  id: z.uuid(),
  name: z.string(),
  gateway: z.object({ id: z.uuid(), name: z.string() }),
  channel: z.number().int(),
  thermocoupleType: z.enum(thermocoupleTypes),
  iecClass: z.number().int(),
  serial: z.string(),
  hearth: z.object({ id: z.uuid(), number: z.number().int() }).nullable(),
  usualRole: z.enum(usualRoles),
  place: z.object({
    height: z.enum(probeHeights),
    side: z.string(),
    depthMm: z.number(),
    mounting: z.enum(probeMountings),
  }),
  /** The newest check of each kind. */
  checks: z.array(probeCheckSchema),
  /** When the earliest of the newest checks is due; null when never checked. */
  checkDueAt: z.iso.datetime().nullable(),
  isCheckDue: z.boolean(),
})
export type ProbeDto = z.infer<typeof probeSchema>

export const listProbesQuery = z.strictObject({
  ...pageQuery,
  hearthId: z.uuid().optional(),
  q: z.string().max(80).optional(),
})
export const probePageSchema = pageSchema(probeSchema)

export const saveProbeSchema = z.strictObject({
  name: z.string('Give a name.').trim().min(1, 'Give a name.').max(60, 'At most 60 letters.'),
  gatewayId: z.uuid('Choose a gateway.'),
  channel: z.number('Give a number.').int('Give a whole number.').min(0, 'From 0.').max(255, 'Up to 255.'),
  thermocoupleType: z.enum(thermocoupleTypes, 'Choose K, N, J or T.'),
  iecClass: z
    .number('Give 1, 2 or 3.')
    .int('Give 1, 2 or 3.')
    .min(1, 'Give 1, 2 or 3.')
    .max(3, 'Give 1, 2 or 3.'),
  serial: z.string().trim().max(60, 'At most 60 letters.').default(''),
  hearthId: z.uuid('Choose a hearth.').nullable().default(null),
  usualRole: z.enum(usualRoles, 'Choose lead, opposite, coals or spare.'),
  height: z.enum(probeHeights, 'Choose a height.'),
  side: z.string('Name the side.').trim().min(1, 'Name the side.').max(20, 'At most 20 letters.'),
  depthMm: z.number('Give the depth.').min(0, 'From 0 mm.').max(60, 'Up to 60 mm.'),
  mounting: z.enum(probeMountings, 'Choose how it is mounted.'),
})

const whenDone = {
  /** Left out: now. */
  checkedAt: z.iso.datetime({ offset: true, error: 'Give a date and time.' }).optional(),
  dueAt: z.iso.datetime({ offset: true, error: 'Give the date it is due again.' }),
}

export const recordProbeCheckSchema = z.strictObject({
  kind: z.enum(checkKinds, 'Choose ice, boiling or block.'),
  /** For boiling it is worked out from the station pressure and may be left out; ice is 0 °C. */
  referenceTempC: z.number().min(-50, 'From -50 °C.').max(400, 'Up to 400 °C.').optional(),
  measuredTempC: z.number('Give what the probe read.').min(-50, 'From -50 °C.').max(400, 'Up to 400 °C.'),
  uncertaintyC: z.number('Give the uncertainty.').gt(0, 'Above 0 °C.').max(10, 'Up to 10 °C.'),
  stationPressureHpa: z.number().min(500, 'From 500 hPa.').max(1100, 'Up to 1,100 hPa.').optional(),
  ...whenDone,
})

export const waterCheckSchema = z.object({
  id: z.uuid(),
  source: z.string(),
  tcaNgPerL: z.number(),
  freeChlorineMgPerL: z.number(),
  checkedAt: z.iso.datetime(),
  dueAt: z.iso.datetime(),
  checkedBy: z.string(),
  isInDate: z.boolean(),
})
export type WaterCheckDto = z.infer<typeof waterCheckSchema>
export const waterCheckPageSchema = pageSchema(waterCheckSchema)
export const listWaterChecksQuery = z.strictObject(pageQuery)

export const recordWaterCheckSchema = z.strictObject({
  source: z.string('Name the source.').trim().min(1, 'Name the source.').max(80, 'At most 80 letters.'),
  tcaNgPerL: z.number('Give the TCA.').min(0, 'From 0 ng/L.').max(1000, 'Up to 1,000 ng/L.'),
  freeChlorineMgPerL: z.number('Give the free chlorine.').min(0, 'From 0 mg/L.').max(20, 'Up to 20 mg/L.'),
  ...whenDone,
})
