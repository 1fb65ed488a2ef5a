import * as z from 'zod'
import { pageQuery, pageSchema } from '@/lib/http/cursor'
import { carbonMonoxideLimitSchema } from '@/lib/site/room-settings'

export const airPlaces = ['room', 'yard'] as const
export type AirPlace = (typeof airPlaces)[number]
export const exposureKinds = ['carbon monoxide', 'heat'] as const
export type ExposureKind = (typeof exposureKinds)[number]
export const dateOrders = ['year first', 'day first', 'month first'] as const
export type DateOrder = (typeof dateOrders)[number]
/** Lines of a meter's file that are taken at once. */
export const fileLinesAtMost = 20_000

const instant = z.iso.datetime({ offset: true, error: 'Give an instant such as 2027-02-01T13:41:00Z.' })
const reason = z.string('Say why.').trim().min(3, 'Say why in a few words.').max(500, 'At most 500 letters.')
const subject = z
  .string('Say who wore it, or where it stood.')
  .trim()
  .min(1, 'Say who wore it, or where it stood.')
  .max(60, 'At most 60 letters.')

export const recordAirSchema = z.strictObject({
  /** The client's own uuid: sending the reading again changes nothing. */
  id: z.uuid(),
  place: z.enum(airPlaces, 'Choose room or yard.'),
  /** Left out: now. */
  at: instant.optional(),
  tempC: z.number('Give the temperature.').min(-40, 'From -40 °C.').max(60, 'Up to 60 °C.'),
  humidityPercent: z.number('Give the humidity in %.').min(0, 'From 0 %.').max(100, 'Up to 100 %.'),
})
export type RecordAir = z.infer<typeof recordAirSchema>

const wbgt = (what: string) =>
  z.number(`Give ${what} in figures.`).min(-20, 'From -20 °C.').max(80, 'Up to 80 °C.')

export const recordExposureSchema = z
  .strictObject({
    id: z.uuid(),
    kind: z.enum(exposureKinds, 'Choose carbon monoxide or heat.'),
    /** Whose day it belongs to: who wore the meter, or where it stood. */
    subject,
    at: instant.optional(),
    ppm: z
      .number('Give the ppm in figures.')
      .min(0, 'From 0 ppm.')
      .max(10_000, 'Up to 10,000 ppm.')
      .nullable()
      .default(null),
    /** As the meter shows it; or else both temperatures that it is made of. */
    wbgtC: wbgt('the WBGT').nullable().default(null),
    wetBulbC: wbgt('the natural wet-bulb temperature').nullable().default(null),
    globeC: z
      .number('Give the globe temperature in figures.')
      .min(-20, 'From -20 °C.')
      .max(150, 'Up to 150 °C.')
      .nullable()
      .default(null),
  })
  .superRefine((reading, context) => {
    const fault = (path: string, message: string) =>
      context.addIssue({ code: 'custom', path: [path], message })
    if (reading.kind === 'carbon monoxide') {
      if (reading.ppm === null) fault('ppm', 'Give the ppm.')
      return
    }
    if (reading.ppm !== null) fault('ppm', 'Leave this out: it belongs to carbon monoxide.')
    if (reading.wbgtC !== null && (reading.wetBulbC !== null || reading.globeC !== null))
      fault('wbgtC', 'Give either the WBGT or the two temperatures, not both.')
    else if (reading.wbgtC === null && reading.wetBulbC === null && reading.globeC === null)
      fault('wbgtC', 'Give the WBGT, or wet bulb and globe.')
    else if (reading.wbgtC === null && reading.wetBulbC === null)
      fault('wetBulbC', 'Give the natural wet bulb too.')
    else if (reading.wbgtC === null && reading.globeC === null) fault('globeC', 'Give the globe too.')
  })
export type RecordExposure = z.infer<typeof recordExposureSchema>

/** Where in a meter's file what stands, by the names of its columns; what is left out is found by its name. */
export const fileColumnsSchema = z.strictObject({
  date: z.string().max(80).optional(),
  time: z.string().max(80).optional(),
  value: z.string().max(80).optional(),
  wetBulb: z.string().max(80).optional(),
  globe: z.string().max(80).optional(),
})
export type FileColumns = z.infer<typeof fileColumnsSchema>

const exposureFile = {
  kind: z.enum(exposureKinds, 'Choose carbon monoxide or heat.'),
  subject,
  fileName: z.string('Choose a file.').trim().min(1, 'Choose a file.').max(120, 'At most 120 letters.'),
  text: z.string('Choose a file.').min(1, 'This file is empty.').max(1_800_000, 'This file is over 1.8 MB.'),
  dateOrder: z.enum(dateOrders, 'Choose the order of day, month and year.').default('year first'),
  /** A time without a zone is the site's, or UTC. */
  zone: z.enum(['site', 'UTC']).default('site'),
  temperatureUnit: z.enum(['C', 'F']).default('C'),
  columns: fileColumnsSchema.default({}),
}
export const previewExposureFileSchema = z.strictObject(exposureFile)
export const uploadExposureFileSchema = z.strictObject({
  ...exposureFile,
  /** The client's own uuid: sending the file again adds nothing. */
  id: z.uuid(),
  /** Lines with a fault are left out; otherwise one fault refuses the file. */
  skipsFaulty: z.boolean().default(false),
})
export type ExposureFile = z.infer<typeof previewExposureFileSchema>

export const exposurePreviewSchema = z.object({
  columns: z.array(z.string()),
  chosen: fileColumnsSchema,
  lineCount: z.number().int(),
  readingCount: z.number().int(),
  /** After readings closer than a minute were made one a minute. */
  minuteCount: z.number().int(),
  /** Of those, how many are kept already. */
  alreadyThere: z.number().int(),
  firstAt: z.iso.datetime().nullable(),
  lastAt: z.iso.datetime().nullable(),
  peak: z.number().nullable(),
  sample: z.array(z.object({ line: z.number().int(), at: z.iso.datetime(), value: z.number() })),
  /** The first fifty. */
  faults: z.array(
    z.object({ line: z.number().int(), column: z.string(), sentence: z.string(), text: z.string() }),
  ),
  faultCount: z.number().int(),
})
export type ExposurePreview = z.infer<typeof exposurePreviewSchema>

export const removeReadingSchema = z.strictObject({ reason })

export const airReadingSchema = z.object({
  id: z.uuid(),
  place: z.enum(airPlaces),
  at: z.iso.datetime(),
  tempC: z.number(),
  humidityPercent: z.number(),
  /** Moisture that wood comes to in such air, % of dry mass; null where the formula does not hold. */
  equilibriumMoisturePercent: z.number().nullable(),
  by: z.string(),
})
export type AirReadingDto = z.infer<typeof airReadingSchema>

export const exposureReadingSchema = z.object({
  id: z.uuid(),
  kind: z.enum(exposureKinds),
  subject: z.string(),
  at: z.iso.datetime(),
  /** ppm, or °C WBGT. */
  value: z.number(),
  wetBulbC: z.number().nullable(),
  globeC: z.number().nullable(),
  by: z.string(),
})
export type ExposureReadingDto = z.infer<typeof exposureReadingSchema>

export const exposureUploadSchema = z.object({
  id: z.uuid(),
  kind: z.enum(exposureKinds),
  subject: z.string(),
  fileName: z.string(),
  readingCount: z.number().int(),
  skippedCount: z.number().int(),
  firstAt: z.iso.datetime().nullable(),
  lastAt: z.iso.datetime().nullable(),
  by: z.string(),
  recordedAt: z.iso.datetime(),
})
export type ExposureUploadDto = z.infer<typeof exposureUploadSchema>

export const carbonMonoxideDaySchema = z.object({
  subject: z.string(),
  readingCount: z.number().int(),
  /** Time that readings stand for, h; the mean counts the rest as nothing. */
  coveredH: z.number(),
  mean8hPpm: z.number(),
  peakPpm: z.number(),
  peakAt: z.iso.datetime(),
  latest: z.object({ at: z.iso.datetime(), ppm: z.number() }),
  /** The site's limits that were passed. */
  over: z.array(carbonMonoxideLimitSchema),
})
export type CarbonMonoxideDay = z.infer<typeof carbonMonoxideDaySchema>

export const heatDaySchema = z.object({
  subject: z.string(),
  readingCount: z.number().int(),
  coveredH: z.number(),
  hottestHourC: z.number(),
  hottestUntil: z.iso.datetime(),
  latest: z.object({ at: z.iso.datetime(), wbgtC: z.number() }),
  over: z.enum(['none', 'alert limit', 'exposure limit']),
})
export type HeatDay = z.infer<typeof heatDaySchema>

export const heatLimitsSchema = z.object({
  metabolicRateW: z.number(),
  /** For people not used to heat, and for those used to it, °C WBGT. */
  alertC: z.number(),
  exposureC: z.number(),
  source: z.string(),
})
export type HeatLimits = z.infer<typeof heatLimitsSchema>

export const dayFiringSchema = z.object({
  id: z.uuid(),
  serial: z.string(),
  hearthNumber: z.number().int().nullable(),
  /** The toast start, or the preheat of one that never toasted: what a reading is near to. */
  at: z.iso.datetime(),
  isFirstOfDay: z.boolean(),
  room: airReadingSchema.nullable(),
  yard: airReadingSchema.nullable(),
})
export type DayFiring = z.infer<typeof dayFiringSchema>

const day = z.iso.date('Write the day as 2027-02-01.')

export const daySchema = z.object({
  day,
  isToday: z.boolean(),
  timeZone: z.string(),
  air: z.array(airReadingSchema),
  carbonMonoxide: z.array(carbonMonoxideDaySchema),
  carbonMonoxideLimits: z.array(carbonMonoxideLimitSchema),
  heat: z.array(heatDaySchema),
  heatLimits: heatLimitsSchema,
  byHand: z.array(exposureReadingSchema),
  uploads: z.array(exposureUploadSchema),
  firings: z.array(dayFiringSchema),
  /** What is not kept of that day yet, in sentences. */
  missing: z.array(z.string()),
})
export type DayDto = z.infer<typeof daySchema>

/** Left out: today, in the site's time zone. */
export const getDayQuery = z.strictObject({ day: day.optional() })

export const dayLineSchema = z.object({
  day,
  firingCount: z.number().int(),
  roomTempC: z.number().nullable(),
  yardTempC: z.number().nullable(),
  yardHumidityPercent: z.number().nullable(),
  carbonMonoxideCount: z.number().int(),
  /** The highest of the day's subjects. */
  mean8hPpm: z.number().nullable(),
  peakPpm: z.number().nullable(),
  hottestHourC: z.number().nullable(),
  isOver: z.boolean(),
  missing: z.array(z.string()),
})
export type DayLine = z.infer<typeof dayLineSchema>
export const dayPageSchema = pageSchema(dayLineSchema)
export const listDaysQuery = z.strictObject(pageQuery)

/** In the page's address: the day that is shown, and the page of the list under it. */
export const conditionsPageQuery = z.strictObject({
  day: day.optional(),
  cursor: z.string().max(400).optional(),
})

/** What stood around one firing: the nearest readings by the site's rule. */
export type FiringAir = { day: string; room: AirReadingDto | null; yard: AirReadingDto | null }
