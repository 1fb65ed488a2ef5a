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
  /** Numbers that it declared lost. */
  lostCount: z.number().int(),
  retiredAt: z.iso.datetime().nullable(),
  /** What its program last said of itself; null for one that says nothing. */
  status: z
    .object({
      at: z.iso.datetime(),
      spooledReadings: z.number().int(),
      spooledBytes: z.number().int(),
      /** Of the oldest reading that no server has acknowledged; null when none waits. */
      oldestUnsentAt: z.iso.datetime().nullable(),
      programVersion: z.string(),
      uptimeS: z.number().int(),
    })
    .nullable(),
})
export type GatewayDto = z.infer<typeof gatewaySchema>
export const gatewayListSchema = z.object({ items: z.array(gatewaySchema), nextCursor: z.null() })

export const saveGatewaySchema = z.strictObject({
  name: z.string('Give a name.').trim().min(1, 'Give a name.').max(60, 'At most 60 letters.'),
  /** May send past instants: only for imports, seeds and tests. */
  mayReplay: z.boolean().default(false),
})

/** Why something is retired; kept in the audit trail. */
export const retireSchema = z.strictObject({
  reason: z.string('Say why.').trim().min(3, 'Say why in a few words.').max(500, 'At most 500 letters.'),
})

export const gatewayDetailSchema = gatewaySchema.extend({
  createdAt: z.iso.datetime(),
  /** The newest twenty starts of its program. */
  boots: z.array(
    z.object({
      number: z.number().int(),
      firstSeenAt: z.iso.datetime(),
      lastSeenAt: z.iso.datetime(),
      ackedSeq: z.number().int(),
      clockOffsetMs: z.number().int(),
      refusedCount: z.number().int(),
      lostCount: z.number().int(),
    }),
  ),
  probes: z.array(
    z.object({
      id: z.uuid(),
      name: z.string(),
      channel: z.number().int(),
      usualRole: z.enum(usualRoles),
      hearthNumber: z.number().int().nullable(),
    }),
  ),
  /** Reasons of refusal with their counts, the most frequent first. */
  refusedReasons: z.array(z.object({ reason: z.string(), count: z.number().int() })),
})
export type GatewayDetailDto = z.infer<typeof gatewayDetailSchema>

export const refusedReadingSchema = z.object({
  boot: z.number().int(),
  seq: z.number().int(),
  reason: z.string(),
  receivedAt: z.iso.datetime(),
  /** As the gateway wrote it; null when it wrote none. */
  at: z.string().nullable(),
  probe: z.object({ id: z.uuid(), name: z.string() }).nullable(),
})
export type RefusedReadingDto = z.infer<typeof refusedReadingSchema>
export const refusedReadingPageSchema = pageSchema(refusedReadingSchema)
export const listRefusedQuery = z.strictObject({ ...pageQuery, reason: z.string().max(200).optional() })

export const declaredLossSchema = z.object({
  boot: z.number().int(),
  fromSeq: z.number().int(),
  toSeq: z.number().int(),
  count: z.number().int(),
  reason: z.string(),
  declaredAt: z.iso.datetime(),
})
export type DeclaredLossDto = z.infer<typeof declaredLossSchema>
export const declaredLossPageSchema = pageSchema(declaredLossSchema)
export const listLossesQuery = z.strictObject(pageQuery)

export const checkWays = ['by hand', 'live'] as const
export const checkStates = ['in date', 'due soon', 'overdue', 'never', 'not asked'] as const

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
  /** Read by eye, or taken from the probe's own settled readings. */
  way: z.enum(checkWays),
  /** Standard deviation of those readings, °C. */
  settledSdC: z.number().nullable(),
  /** The pressure was taken from an altitude, m. */
  altitudeM: z.number().nullable(),
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
  /** In one word; a coals probe is not asked for checks, since it makes no dose. */
  checkState: z.enum(checkStates),
  /** What keeps it from being a lead probe without a signed override, in sentences; empty for none. */
  leadFaults: z.array(z.string()),
  /** It reads a firing now: it is not moved or retired. */
  isReading: z.boolean(),
  retiredAt: z.iso.datetime().nullable(),
})
export type ProbeDto = z.infer<typeof probeSchema>

export const probeSorts = ['no', '-no', 'name', '-name', 'hearth', '-hearth', 'due', '-due'] as const
export const listProbesQuery = z.strictObject({
  ...pageQuery,
  hearthId: z.uuid().optional(),
  gatewayId: z.uuid().optional(),
  /** Left out: in use. */
  state: z.enum(['in use', 'retired', 'all']).optional(),
  due: z.enum(['overdue', 'soon']).optional(),
  role: z.enum(usualRoles).optional(),
  /** Left out: in the order in which they were added. */
  sort: z.enum(probeSorts).optional(),
  q: z.string().max(80).optional(),
})

/** Where a probe was, from an instant until another. */
export const probePlaceSchema = z.object({
  gateway: z.object({ id: z.uuid(), name: z.string() }),
  channel: z.number().int(),
  hearthNumber: z.number().int().nullable(),
  usualRole: z.enum(usualRoles),
  height: z.enum(probeHeights),
  side: z.string(),
  depthMm: z.number(),
  mounting: z.enum(probeMountings),
  fromAt: z.iso.datetime(),
  /** Null: now. */
  untilAt: z.iso.datetime().nullable(),
  /** Who put it there; null for the set-up. */
  changedBy: z.string().nullable(),
})
export type ProbePlaceDto = z.infer<typeof probePlaceSchema>

export const probeDetailSchema = probeSchema.extend({
  createdAt: z.iso.datetime(),
  /** Where it was, newest first. */
  places: z.array(probePlaceSchema),
  /** Every check, newest first. */
  allChecks: z.array(probeCheckSchema),
})
export type ProbeDetailDto = z.infer<typeof probeDetailSchema>

export const probeFiringSchema = z.object({
  firingId: z.uuid(),
  serial: z.string(),
  recipeName: z.string(),
  versionNumber: z.number().int(),
  role: z.enum(['lead', 'opposite', 'coals']),
  place: z.object({ height: z.string(), side: z.string(), depthMm: z.number(), mounting: z.string() }),
  fromAt: z.iso.datetime(),
  untilAt: z.iso.datetime().nullable(),
})
export type ProbeFiringDto = z.infer<typeof probeFiringSchema>
export const probeFiringPageSchema = pageSchema(probeFiringSchema)
export const listProbeFiringsQuery = z.strictObject(pageQuery)

export const recentReadingsQuery = z.strictObject({
  /** How far back, s. */
  seconds: z.coerce.number().int().min(5, 'At least 5.').max(900, 'At most 900.').default(150),
})
/** What a probe says now, whatever it reads; without its correction, which a check is there to find. */
export const recentReadingsSchema = z.object({
  nowMs: z.number().int(),
  /** Ms since 1970 UTC, rising. */
  atMs: z.array(z.number().int()),
  /** °C as the thermocouple gives it; null: no reading. */
  tempC: z.array(z.number().nullable()),
})
export type RecentReadingsDto = z.infer<typeof recentReadingsSchema>
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
  /** Left out: the site's usual time after the check. */
  dueAt: z.iso.datetime({ offset: true, error: 'Give the date it is due again.' }).optional(),
}

export const recordProbeCheckSchema = z.strictObject({
  kind: z.enum(checkKinds, 'Choose ice, boiling or block.'),
  /** For boiling it is worked out from the station pressure and may be left out; ice is 0 °C. */
  referenceTempC: z.number().min(-50, 'From -50 °C.').max(400, 'Up to 400 °C.').optional(),
  /** What was read by eye; left out when `takenAt` takes the probe's own readings. */
  measuredTempC: z
    .number('Give what the probe read.')
    .min(-50, 'From -50 °C.')
    .max(400, 'Up to 400 °C.')
    .optional(),
  /** The end of the window of settled readings that are taken. */
  takenAt: z.iso.datetime({ offset: true, error: 'Give an instant.' }).optional(),
  /** Of the whole check, k = 2; left out: made from the reference's, the scatter and the resolution. */
  uncertaintyC: z.number('Give the uncertainty.').gt(0, 'Above 0 °C.').max(10, 'Up to 10 °C.').optional(),
  /** Of the reference alone, k = 2. */
  referenceUncertaintyC: z.number('Give a number.').gt(0, 'Above 0 °C.').max(10, 'Up to 10 °C.').optional(),
  /** Smallest step of what was read by eye, °C. */
  resolutionC: z.number('Give a number.').gt(0, 'Above 0 °C.').max(5, 'Up to 5 °C.').optional(),
  stationPressureHpa: z.number().min(500, 'From 500 hPa.').max(1100, 'Up to 1,100 hPa.').optional(),
  /** In place of the pressure; the day's own differs from it. */
  altitudeM: z.number('Give a number.').min(-500, 'From −500 m.').max(5000, 'Up to 5,000 m.').optional(),
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
  isDueSoon: z.boolean(),
  /** What is above the site's limit, in a sentence; null when nothing is. */
  overLimit: z.string().nullable(),
  /** The newest of its source: the one that counts. */
  isNewest: z.boolean(),
})
export type WaterCheckDto = z.infer<typeof waterCheckSchema>
export const waterCheckPageSchema = pageSchema(waterCheckSchema)
export const listWaterChecksQuery = z.strictObject({
  ...pageQuery,
  source: z.string().max(80).optional(),
})
export const waterSourceListSchema = z.object({ items: z.array(waterCheckSchema), nextCursor: z.null() })

export const recordWaterCheckSchema = z.strictObject({
  source: z.string('Name the source.').trim().min(1, 'Name the source.').max(80, 'At most 80 letters.'),
  tcaNgPerL: z.number('Give the TCA.').min(0, 'From 0 ng/L.').max(1000, 'Up to 1,000 ng/L.'),
  freeChlorineMgPerL: z.number('Give the free chlorine.').min(0, 'From 0 mg/L.').max(20, 'Up to 20 mg/L.'),
  ...whenDone,
})
