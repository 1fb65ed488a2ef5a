import * as z from 'zod'
import { alarmKinds } from '@/lib/alarms/alarm-kinds'
import { alarmStates } from '@/lib/alarms/alarm-states'
import { pageQuery, pageSchema } from '@/lib/http/cursor'

/** Longest that the product lets any site choose; the site's own limit is in its rules. */
const mostMinutes = 120

export const shelveAlarmSchema = z.strictObject({
  minutes: z
    .number('Say for how many minutes.')
    .min(1, 'At least 1 min.')
    .max(mostMinutes, `At most ${mostMinutes} min.`),
  reason: z.string('Say why.').trim().min(3, 'Say why in a few words.').max(200, 'At most 200 characters.'),
})

/** One coming of an alarm, from when it came until it was normal again. */
export const alarmSchema = z.object({
  id: z.uuid(),
  firingId: z.uuid(),
  kind: z.enum(alarmKinds),
  subject: z.string(),
  /** As it was said when it came; in °C (`shownAlarmWords`). */
  words: z.string(),
  value: z.number().nullable(),
  limit: z.number().nullable(),
  cameAt: z.iso.datetime(),
  /** When what it said was over; null while it is on. */
  overAt: z.iso.datetime().nullable(),
  state: z.enum(alarmStates),
  /** Null while nobody has taken note of it, and for those that go by themselves. */
  seen: z.object({ at: z.iso.datetime(), by: z.string() }).nullable(),
  /** The last time it was shelved. */
  shelf: z
    .object({ at: z.iso.datetime(), until: z.iso.datetime(), by: z.string(), reason: z.string() })
    .nullable(),
  /** By what it was suppressed at last, in words. */
  suppressedBy: z.string().nullable(),
  hearthNumber: z.number().int().nullable(),
  serial: z.string(),
  toaster: z.object({ id: z.uuid(), name: z.string() }).nullable(),
})
export type AlarmDto = z.infer<typeof alarmSchema>
export const alarmPageSchema = pageSchema(alarmSchema)

function noBlank(value: unknown): unknown {
  return value === '' ? undefined : value
}

const day = z.preprocess(noBlank, z.iso.date('Write the date as 2027-03-31.').optional())

const filters = {
  hearth: z.preprocess(noBlank, z.coerce.number().int().min(1).max(99).optional()),
  /** Left out: alarms without reminders. */
  kind: z.preprocess(noBlank, z.enum([...alarmKinds, 'all']).optional()),
  toasterId: z.preprocess(noBlank, z.uuid().optional()),
  firingId: z.preprocess(noBlank, z.uuid().optional()),
  /** Days of the site's calendar, both included. */
  from: day,
  to: day,
}

const inOrder = (query: { from?: string | undefined; to?: string | undefined }) =>
  query.from === undefined || query.to === undefined || query.from <= query.to
const orderFault = { path: ['to'], error: 'The last day must not be before the first.' }

export const alarmFiltersSchema = z.strictObject(filters).refine(inOrder, orderFault)
export type AlarmFilters = z.infer<typeof alarmFiltersSchema>
export const listAlarmsQuery = z.strictObject({ ...pageQuery, ...filters }).refine(inOrder, orderFault)
export type ListAlarmsQuery = z.infer<typeof listAlarmsQuery>

/** What the rates are made from, and how often alarms came. Reminders are no alarms and are not counted. */
export const alarmRatesSchema = z.object({
  from: z.iso.datetime(),
  until: z.iso.datetime(),
  /** In the order of their names. Hours are those with a barrel over a fire, two at once counted once. */
  toasters: z.array(
    z.object({
      id: z.uuid(),
      name: z.string(),
      alarms: z.number().int(),
      hours: z.number(),
      perTenMin: z.number().nullable(),
      firings: z.number().int(),
    }),
  ),
  kinds: z.array(
    z.object({
      kind: z.enum(alarmKinds),
      alarms: z.number().int(),
      /** Median time for which it stood, s; null when none is over. */
      medianS: z.number().nullable(),
      /** Median time until somebody took note, s. */
      medianSeenS: z.number().nullable(),
    }),
  ),
  /** Came three times or more within ten minutes in one firing. */
  chattering: z.array(
    z.object({ firingId: z.uuid(), serial: z.string(), kind: z.enum(alarmKinds), times: z.number().int() }),
  ),
  /** On for over ten minutes now. */
  standing: z.array(alarmSchema),
  shelved: z.array(alarmSchema),
})
export type AlarmRatesDto = z.infer<typeof alarmRatesSchema>
