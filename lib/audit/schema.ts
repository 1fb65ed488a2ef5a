import * as z from 'zod'
import { pageQuery, pageSchema } from '@/lib/http/cursor'

function noBlank(value: unknown): unknown {
  return value === '' ? undefined : value
}

const text = (most: number) =>
  z.preprocess(noBlank, z.string().trim().max(most, `At most ${most} characters.`).optional())

/** A day of the site's calendar, both ends included. */
const day = z.preprocess(noBlank, z.iso.date('Write the date as 2027-03-31.').optional())

export const auditQuery = z
  .strictObject({
    ...pageQuery,
    /** Part of a person's name. */
    actor: text(80),
    actorId: z.preprocess(noBlank, z.uuid().optional()),
    /** "account.closed", or its beginning "account". */
    action: text(80),
    subjectType: text(80),
    subjectId: text(80),
    from: day,
    to: day,
  })
  .refine((query) => query.from === undefined || query.to === undefined || query.from <= query.to, {
    path: ['to'],
    error: 'The last day must not be before the first.',
  })
export type AuditQuery = z.infer<typeof auditQuery>

export const auditEntrySchema = z.object({
  seq: z.int(),
  at: z.iso.datetime(),
  actorId: z.uuid().nullable(),
  actorName: z.string(),
  action: z.string(),
  subjectType: z.string(),
  subjectId: z.string(),
  detail: z.record(z.string(), z.unknown()),
  hash: z.string(),
})
export type AuditEntryDto = z.infer<typeof auditEntrySchema>
export const auditPageSchema = pageSchema(auditEntrySchema)

export const chainSchema = z.object({
  /** How many entries hold, from the first on. */
  entries: z.int(),
  isIntact: z.boolean(),
  /** The number of the first entry that is changed, missing or out of order. */
  firstBrokenSeq: z.int().nullable(),
  /** Note it with `entries`: whoever has both can later tell that nothing before was cut off or made anew. */
  lastHash: z.string(),
  verifiedAt: z.iso.datetime(),
})
export type ChainDto = z.infer<typeof chainSchema>
