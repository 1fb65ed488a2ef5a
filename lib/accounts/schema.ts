import * as z from 'zod'
import { roles } from '@/lib/auth/actor'
import { pageQuery, pageSchema } from '@/lib/http/cursor'

/** The single source of what accounts, sessions, links and customers say over the wire. */

export const email = z
  .string('Write an e-mail address.')
  .trim()
  .min(3, 'Write an e-mail address.')
  .max(254, 'An e-mail address has at most 254 characters.')
  .pipe(z.email('This is no e-mail address. Write it as name@place.example.'))

export const personName = z
  .string('Write a name.')
  .trim()
  .min(1, 'Write a name.')
  .max(80, 'At most 80 characters.')

/** NIST SP 800-63B: length and a list of common passwords decide, never the kinds of characters. */
export const passwordMinimum = 12
export const passwordMaximum = 128

export const newPassword = z
  .string('Write a password.')
  .refine((text) => countCharacters(text) >= passwordMinimum, {
    error: `Write at least ${passwordMinimum} characters; 15 or more are better, for example four words.`,
  })
  .refine((text) => countCharacters(text) <= passwordMaximum, {
    error: `Write at most ${passwordMaximum} characters.`,
  })

/** Characters as a person counts them, so that no script is worth less than another. */
function countCharacters(text: string): number {
  return [...text.normalize('NFKC')].length
}

/** A password that is asked for, not chosen: any text, so that nothing is told about how ours look. */
const knownPassword = z
  .string('Write your password.')
  .min(1, 'Write your password.')
  .max(1024, 'This is too long.')

const role = z.enum(roles, 'Choose a role.')
const temperatureUnit = z.enum(['C', 'F'], 'Choose C or F.')
const revision = z.int('Send the revision that you edited.').min(1)
const token = z.string('The link is cut short.').min(1, 'The link is cut short.').max(200)
const nothingBlank = (text: string | undefined) => (text === '' ? undefined : text)

export const idParams = z.strictObject({ id: z.uuid() })

export const signInBody = z.strictObject({
  email: z.string('Write your e-mail address.').trim().min(1, 'Write your e-mail address.').max(254),
  password: knownPassword,
})
export type SignInBody = z.infer<typeof signInBody>

export const signOutQuery = z.strictObject({
  /** Left out: by hand. */
  why: z.enum(['idle'], 'Leave it out, or say idle.').optional(),
})
export type SignOutQuery = z.infer<typeof signOutQuery>

export const preferencesBody = z.strictObject({
  name: personName.optional(),
  temperatureUnit: temperatureUnit.optional(),
})
export type PreferencesBody = z.infer<typeof preferencesBody>

export const changePasswordBody = z.strictObject({ currentPassword: knownPassword, newPassword })
export type ChangePasswordBody = z.infer<typeof changePasswordBody>

/** 4 to 6 figures: short enough for gloves, and good at one device alone. */
export const pin = z.string('Type a PIN.').regex(/^\d{4,6}$/, 'A PIN has 4 to 6 figures.')

export const setPinBody = z.strictObject({ password: knownPassword, pin })
export type SetPinBody = z.infer<typeof setPinBody>

export const accountListQuery = z.strictObject({
  ...pageQuery,
  q: z.string().trim().max(100, 'At most 100 characters.').optional(),
  role: z.preprocess(nothingBlankUnknown, role.optional()),
  state: z.preprocess(
    nothingBlankUnknown,
    z.enum(['invited', 'active', 'closed'], 'Choose invited, active or closed.').optional(),
  ),
})
export type AccountListQuery = z.infer<typeof accountListQuery>

function nothingBlankUnknown(value: unknown): unknown {
  return value === '' ? undefined : value
}

export const customerNeeded = 'Choose the customer whose orders this person may follow.'
export const customerForbidden = 'Only an account with the role customer belongs to a customer. Leave it out.'

const roleWithCustomer = { role, customerId: z.uuid('Choose a customer from the list.').nullish() }

function checkCustomer(
  value: { role: string; customerId?: string | null | undefined },
  context: z.RefinementCtx,
) {
  const has = value.customerId !== null && value.customerId !== undefined
  if ((value.role === 'customer') === has) return
  context.addIssue({
    code: 'custom',
    path: ['customerId'],
    message: has ? customerForbidden : customerNeeded,
  })
}

export const inviteBody = z
  .strictObject({ email, name: personName, ...roleWithCustomer })
  .superRefine(checkCustomer)
export type InviteBody = z.infer<typeof inviteBody>

export const updateAccountBody = z
  .strictObject({ revision, name: personName, ...roleWithCustomer })
  .superRefine(checkCustomer)
export type UpdateAccountBody = z.infer<typeof updateAccountBody>

export const revisionBody = z.strictObject({ revision })
export type RevisionBody = z.infer<typeof revisionBody>

export const inspectLinkBody = z.strictObject({ token })
export type InspectLinkBody = z.infer<typeof inspectLinkBody>

export const acceptInvitationBody = z.strictObject({
  token,
  name: z.string().trim().max(80, 'At most 80 characters.').optional().transform(nothingBlank),
  password: newPassword,
})
export type AcceptInvitationBody = z.infer<typeof acceptInvitationBody>

export const requestResetBody = z.strictObject({ email })
export type RequestResetBody = z.infer<typeof requestResetBody>

export const resetPasswordBody = z.strictObject({ token, password: newPassword })
export type ResetPasswordBody = z.infer<typeof resetPasswordBody>

export const firstAdministratorBody = z.strictObject({
  token,
  email,
  name: personName,
  password: newPassword,
})
export type FirstAdministratorBody = z.infer<typeof firstAdministratorBody>

export const customerBody = z.strictObject({
  name: z
    .string('Write the customer’s name.')
    .trim()
    .min(1, 'Write the customer’s name.')
    .max(120, 'At most 120 characters.'),
  contactEmail: email.nullish(),
})
export type CustomerBody = z.infer<typeof customerBody>

export const customerListQuery = z.strictObject({
  ...pageQuery,
  q: z.string().trim().max(100, 'At most 100 characters.').optional(),
})
export type CustomerListQuery = z.infer<typeof customerListQuery>

// What the server answers.

const instant = z.iso.datetime()
const customerRef = z.object({ id: z.uuid(), name: z.string() })

export const accountSchema = z.object({
  id: z.uuid(),
  email: z.string(),
  name: z.string(),
  role,
  customer: customerRef.nullable(),
  state: z.enum(['invited', 'active', 'closed']),
  createdAt: instant,
  /** The last use of any session that is still open; null when there is none. */
  lastSeenAt: instant.nullable(),
  /** Of an invited account: until when its newest link serves; null when it has none that serves. */
  invitationUntil: instant.nullable(),
  revision: z.int(),
})
export type AccountDto = z.infer<typeof accountSchema>

export const accountPageSchema = pageSchema(accountSchema)

export const meSchema = z.object({
  id: z.uuid(),
  email: z.string(),
  name: z.string(),
  role,
  customer: customerRef.nullable(),
  temperatureUnit,
})
export type MeDto = z.infer<typeof meSchema>

export const invitationSchema = z.object({
  account: accountSchema,
  isMailSent: z.boolean(),
  /** The one-time link itself, only when no mail could be sent: hand it over by another way. */
  link: z.string().nullable(),
})
export type InvitationDto = z.infer<typeof invitationSchema>

export const sessionSchema = z.object({
  id: z.uuid(),
  isThisOne: z.boolean(),
  startedAt: instant,
  lastSeenAt: instant,
  /** What the browser said it is, and where it came from, as far as known. */
  userAgent: z.string().nullable(),
  address: z.string().nullable(),
  /** The enrolled device at which a PIN opened it; null for a sign-in by password. */
  byPinAt: z.string().nullable(),
})
export type SessionDto = z.infer<typeof sessionSchema>
export const sessionListSchema = z.object({ items: z.array(sessionSchema) })

export const pinSchema = z.object({
  /** Null when there is none. */
  setAt: instant.nullable(),
  /** After ten wrong tries in a row; signing in by password opens it again. */
  isLocked: z.boolean(),
})
export type PinDto = z.infer<typeof pinSchema>

export const linkSchema = z.object({
  purpose: z.enum(['invitation', 'password reset', 'first administrator']),
  email: z.string().nullable(),
  name: z.string().nullable(),
  expiresAt: instant,
})
export type LinkDto = z.infer<typeof linkSchema>

export const customerSchema = z.object({
  id: z.uuid(),
  name: z.string(),
  contactEmail: z.string().nullable(),
  createdAt: instant,
})
export type CustomerDto = z.infer<typeof customerSchema>
export const customerPageSchema = pageSchema(customerSchema)
