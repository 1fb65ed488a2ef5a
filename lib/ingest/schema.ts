import * as z from 'zod'

/** Answered once, at the making: only its hash is kept. */
export const issuedTokenSchema = z.object({
  id: z.uuid(),
  token: z.string().meta({ description: 'Shown once. Put it into the gateway; only its hash is kept here.' }),
})

export const tokenListSchema = z.object({
  items: z.array(
    z.object({
      id: z.uuid(),
      createdAt: z.iso.datetime(),
      createdBy: z.string().nullable(),
      lastUsedAt: z.iso.datetime().nullable(),
      revokedAt: z.iso.datetime().nullable(),
      /** It is being replaced: it ends then, or when the new one is first used. */
      expiresAt: z.iso.datetime().nullable(),
    }),
  ),
  nextCursor: z.null(),
})

/** Shown once; only its hash is kept. */
export const enrolmentCodeSchema = z.object({
  code: z.string().meta({ description: 'Shown once: K7QW-3M9X-TR4H. Used once, within 30 minutes.' }),
  expiresAt: z.iso.datetime(),
})
export type EnrolmentCode = z.infer<typeof enrolmentCodeSchema>

export const enrolGatewaySchema = z.strictObject({
  code: z.string('Give the code.').trim().min(1, 'Give the code.').max(40, 'At most 40 characters.'),
  /** What the machine calls itself; kept with the enrolment. */
  name: z.string().trim().max(80, 'At most 80 characters.').optional(),
})

export const enrolledGatewaySchema = z.object({
  token: z.string().meta({ description: 'The device token, answered this once.' }),
  gatewayId: z.uuid(),
  gatewayName: z.string(),
})
export type EnrolledGateway = z.infer<typeof enrolledGatewaySchema>

export const healthSchema = z.object({ status: z.literal('ok') })

export type IssuedToken = z.infer<typeof issuedTokenSchema>
export type TokenList = z.infer<typeof tokenListSchema>
