import * as z from 'zod'
import {
  blisterPlaces,
  lossFaults,
  lossKinds,
  replacedWhens,
  stavePositionAtMost,
} from '@/lib/barrels/loss-kinds'

const instant = z.iso.datetime({ offset: true, error: 'Give an instant such as 2027-02-01T13:41:00Z.' })
const lot = (what: string) =>
  z.string(`Name ${what}.`).trim().min(1, `Name ${what}.`).max(60, 'At most 60 letters.')

export const addLossSchema = z
  .strictObject({
    /** The client's own uuid: sending the loss again changes nothing. */
    id: z.uuid(),
    /** The firing in which it came; null for what was found later, such as a leak at the test. */
    firingId: z.uuid().nullable().default(null),
    kind: z.enum(lossKinds, `Choose one of ${lossKinds.join(', ')}.`),
    /** Counted from the bung stave, clockwise seen from the head; null only for a leak that no stave is known for. */
    stavePosition: z
      .number('Give the stave’s number.')
      .int('Give a whole number.')
      .min(1, 'From 1.')
      .max(stavePositionAtMost, `Up to ${stavePositionAtMost}.`)
      .nullable()
      .default(null),
    /** Left out: the batch's. */
    woodLot: lot('the wood lot').optional(),
    blisterPlace: z
      .enum(blisterPlaces, `Choose ${blisterPlaces.join(', ')}.`)
      .nullable()
      .default(null),
    blisterSizeMm: z
      .number('Give the size in mm.')
      .positive('Above 0 mm.')
      .max(500, 'Up to 500 mm.')
      .nullable()
      .default(null),
    replacedWhen: z
      .enum(replacedWhens, `Choose ${replacedWhens.join(' or ')}.`)
      .nullable()
      .default(null),
    replacementLot: lot('the lot of the new stave').nullable().default(null),
    /** Of a stave put in after the toast: its own toast, or "untoasted". */
    replacementToast: z.string().trim().min(1).max(80, 'At most 80 letters.').nullable().default(null),
    words: z.string().trim().max(500, 'At most 500 letters.').default(''),
    at: instant.optional(),
    /** The loss that this one stands in place of. */
    replacesId: z.uuid().optional(),
  })
  .superRefine((loss, context) => {
    for (const [field, sentence] of lossFaults(loss)) {
      context.addIssue({ code: 'custom', path: [field], message: sentence })
    }
  })
export type AddLoss = z.infer<typeof addLossSchema>

export const removeLossSchema = z.strictObject({
  /** The client's own uuid. */
  id: z.uuid(),
  reason: z.string('Say why.').trim().min(3, 'Say why in a few words.').max(500, 'At most 500 letters.'),
})

export const lossSchema = z.object({
  id: z.uuid(),
  pieceId: z.uuid(),
  firingId: z.uuid().nullable(),
  kind: z.enum(lossKinds),
  stavePosition: z.number().int().nullable(),
  woodLot: z.string(),
  blisterPlace: z.enum(blisterPlaces).nullable(),
  blisterSizeMm: z.number().nullable(),
  replacedWhen: z.enum(replacedWhens).nullable(),
  replacementLot: z.string().nullable(),
  replacementToast: z.string().nullable(),
  words: z.string(),
  at: z.iso.datetime(),
  by: z.string(),
  /** Set when it does not stand any more: taken back with a reason, or another stands in its place. */
  ended: z
    .object({
      by: z.string(),
      at: z.iso.datetime(),
      reason: z.string().nullable(),
      replacedById: z.uuid().nullable(),
    })
    .nullable(),
})
export type LossDto = z.infer<typeof lossSchema>
export const lossListSchema = z.object({ items: z.array(lossSchema), nextCursor: z.null() })
