export const photoKinds = ['face', 'blister', 'other'] as const
export type PhotoKind = (typeof photoKinds)[number]
export const photoSizes = ['large', 'thumbnail'] as const
export type PhotoSize = (typeof photoSizes)[number]

/** The largest picture that is taken, and how many a firing keeps (held by the database too). */
export const photoBytesAtMost = 15 * 1024 * 1024
export const photosAtMost = 12
