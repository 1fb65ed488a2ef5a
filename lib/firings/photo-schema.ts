import * as z from 'zod'
import { photoKinds } from '@/lib/firings/photo-kinds'

const kind = z.enum(photoKinds, 'Choose face, blister or other.')
const caption = z.string().trim().max(200, 'At most 200 letters.').default('')

/** Travels beside the picture, in the query. */
export const addPhotoQuery = z.strictObject({
  /** The client's own uuid: sending the picture again adds nothing. */
  id: z.uuid('Send the photo’s own id.'),
  kind,
  caption,
})

export const describePhotoSchema = z.strictObject({ kind, caption })

export const removePhotoSchema = z.strictObject({
  reason: z.string('Say why.').trim().min(3, 'Say why in a few words.').max(500, 'At most 500 letters.'),
})

export const photoSchema = z.object({
  id: z.uuid(),
  firingId: z.uuid(),
  kind: z.enum(photoKinds),
  caption: z.string(),
  widthPx: z.number().int(),
  heightPx: z.number().int(),
  byteCount: z.number().int(),
  addedAt: z.iso.datetime(),
  by: z.string(),
  /** The picture is gone then, and this is what stays of it. */
  removed: z.object({ at: z.iso.datetime(), by: z.string(), reason: z.string() }).nullable(),
})
export type PhotoDto = z.infer<typeof photoSchema>
export const photoListSchema = z.object({ items: z.array(photoSchema), nextCursor: z.null() })
