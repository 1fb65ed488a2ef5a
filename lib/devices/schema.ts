import * as z from 'zod'
import { pin } from '@/lib/accounts/schema'
import { deviceKinds, staffRoles } from '@/lib/auth/actor'
import { pageQuery, pageSchema } from '@/lib/http/cursor'

/** The single source of what shared tablets and wall screens say over the wire. */

export const idParams = z.strictObject({ id: z.uuid() })
const instant = z.iso.datetime()

const particulars = {
  name: z
    .string('Write a name.')
    .trim()
    .min(1, 'Write a name, such as Tablet hearth 2.')
    .max(60, 'At most 60 letters.'),
  kind: z.enum(deviceKinds, 'Choose a hearth, the whole room or a wall screen.'),
  /** Of a tablet at a hearth, and of no other. */
  hearthId: z.uuid('Choose a hearth.').nullable().default(null),
  temperatureUnit: z.enum(['C', 'F'], 'Choose °C or °F.').default('C'),
  /** After so long without a touch it signs the person out. */
  idleMinutes: z
    .int('Give whole minutes.')
    .min(1, 'At least 1 minute.')
    .max(240, 'At most 240 minutes.')
    .default(10),
}

function checkHearth(
  value: { kind: string; hearthId?: string | null | undefined },
  context: z.RefinementCtx,
): void {
  const has = value.hearthId !== null && value.hearthId !== undefined
  if ((value.kind === 'hearth') === has) return
  context.addIssue({
    code: 'custom',
    path: ['hearthId'],
    message: has
      ? 'Only a tablet at a hearth has one. Leave it out.'
      : 'Choose the hearth at which it stands.',
  })
}

export const makeDeviceBody = z.strictObject(particulars).superRefine(checkHearth)
export type MakeDeviceBody = z.infer<typeof makeDeviceBody>

export const updateDeviceBody = z
  .strictObject({ revision: z.int('Send the revision that you edited.').min(1), ...particulars })
  .superRefine(checkHearth)
export type UpdateDeviceBody = z.infer<typeof updateDeviceBody>

export const enrolDeviceBody = z.strictObject({
  code: z.string('Type the code.').trim().min(1, 'Type the code.').max(40, 'At most 40 characters.'),
})
export type EnrolDeviceBody = z.infer<typeof enrolDeviceBody>

export const pinSignInBody = z.strictObject({ accountId: z.uuid('Choose a name.'), pin })
export type PinSignInBody = z.infer<typeof pinSignInBody>

export const deviceListQuery = z.strictObject({
  ...pageQuery,
  q: z.string().trim().max(100, 'At most 100 characters.').optional(),
  state: z.enum(['in use', 'waiting', 'revoked', 'all'], 'Choose a state.').default('in use'),
})
export type DeviceListQuery = z.infer<typeof deviceListQuery>

// What the server answers.

export const deviceSchema = z.object({
  id: z.uuid(),
  name: z.string(),
  kind: z.enum(deviceKinds),
  hearth: z.object({ id: z.uuid(), number: z.int() }).nullable(),
  temperatureUnit: z.enum(['C', 'F']),
  idleMinutes: z.int(),
  /** 'waiting': its code has not been typed yet. */
  state: z.enum(['waiting', 'enrolled', 'revoked']),
  createdAt: instant,
  createdBy: z.string(),
  enrolledAt: instant.nullable(),
  lastSeenAt: instant.nullable(),
  /** What its browser said it is. */
  userAgent: z.string().nullable(),
  revokedAt: instant.nullable(),
  /** Until when a code serves that has not been typed yet. */
  codeUntil: instant.nullable(),
  /** Who is signed in at it now. */
  person: z.string().nullable(),
  revision: z.int(),
})
export type DeviceDto = z.infer<typeof deviceSchema>
export const devicePageSchema = pageSchema(deviceSchema)

/** The code is answered this once; only its hash is kept. */
export const deviceCodeSchema = z.object({
  device: deviceSchema,
  code: z.string().meta({ description: 'Shown once: K7QW-3M9X-TR4H. Typed once, within 30 minutes.' }),
  expiresAt: instant,
})
export type DeviceCodeDto = z.infer<typeof deviceCodeSchema>

export const enrolledDeviceSchema = z.object({ name: z.string(), kind: z.enum(deviceKinds) })
export type EnrolledDeviceDto = z.infer<typeof enrolledDeviceSchema>

/** Those who may sign in at a device by PIN. */
export const pinPersonSchema = z.object({
  id: z.uuid(),
  name: z.string(),
  role: z.enum(staffRoles),
  isLocked: z.boolean(),
})
export type PinPersonDto = z.infer<typeof pinPersonSchema>
export const pinPeopleSchema = z.object({ items: z.array(pinPersonSchema) })
