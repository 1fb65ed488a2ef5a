import * as z from 'zod'
import { alarmRulesSchema, signalRulesSchema, siteRulesSchema } from '@/lib/science/site-rules'
import { roomSettingsSchema } from '@/lib/site/room-settings'

export const siteName = z
  .string('Write the cooperage’s name.')
  .trim()
  .min(1, 'Write the cooperage’s name.')
  .max(120, 'At most 120 characters.')

export const serialPrefix = z
  .string('Write 2 to 5 capital letters.')
  .trim()
  .regex(/^[A-Z]{2,5}$/, 'Write 2 to 5 capital letters, such as SML.')

export const timeZone = z
  .string('Choose a time zone.')
  .refine(isTimeZone, 'This time zone is not known. Write it as Europe/Paris.')

function isTimeZone(text: string): boolean {
  try {
    new Intl.DateTimeFormat('en', { timeZone: text })
    return text.length <= 64
  } catch {
    return false
  }
}

export const siteSettingsBody = z.strictObject({
  /** The version that was edited; another one in force answers 409 with it. */
  version: z.int('Send the version that you edited.').min(1),
  name: siteName,
  serialPrefix,
  timeZone,
  // Whole: what is left out of a change is not taken for a default.
  rules: siteRulesSchema.extend({ signals: signalRulesSchema, alarms: alarmRulesSchema }),
  room: roomSettingsSchema,
})
export type SiteSettingsBody = z.infer<typeof siteSettingsBody>

export const siteSettingsSchema = z.object({
  version: z.int(),
  name: z.string(),
  serialPrefix: z.string(),
  timeZone: z.string(),
  rules: siteRulesSchema,
  room: roomSettingsSchema,
  isDemo: z.boolean(),
  changedAt: z.iso.datetime(),
  /** Null for the version that set-up wrote. */
  changedBy: z.string().nullable(),
})
export type SiteSettingsDto = z.infer<typeof siteSettingsSchema>
