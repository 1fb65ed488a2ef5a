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
    }),
  ),
  nextCursor: z.null(),
})

export const healthSchema = z.object({ status: z.literal('ok') })

export type IssuedToken = z.infer<typeof issuedTokenSchema>
export type TokenList = z.infer<typeof tokenListSchema>
