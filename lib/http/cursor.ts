import * as z from 'zod'
import { AppError } from '@/lib/errors'

/** Query fields of every list: cursor and page size. */
export const pageQuery = {
  cursor: z.string().max(400).optional(),
  limit: z.coerce.number().int().min(1, 'At least 1.').max(200, 'At most 200.').default(50),
}

/** A page of a list; `nextCursor` is null on the last page. */
export type Page<T> = { items: T[]; nextCursor: string | null }

export function pageSchema<T extends z.ZodType>(item: T) {
  return z.object({ items: z.array(item), nextCursor: z.string().nullable() })
}

/** A cursor is the sort key of the last item, opaque to the client. */
export function encodeCursor(key: readonly (string | number | null)[]): string {
  return Buffer.from(JSON.stringify(key)).toString('base64url')
}

const keySchema = z.array(z.union([z.string(), z.number(), z.null()])).max(4)

/** @throws AppError 'invalid' when the cursor is not one of ours. */
export function decodeCursor(cursor: string, length: number): (string | number | null)[] {
  try {
    const key = keySchema.parse(JSON.parse(Buffer.from(cursor, 'base64url').toString('utf8')))
    if (key.length === length) return key
  } catch {
    // Falls to the sentence below: a cursor that does not decode is one fault, however it is broken.
  }
  throw new AppError('invalid', 'This page link is not valid any more. Start from the first page.', {
    fields: { cursor: 'Leave it out to start from the first page.' },
  })
}

/** Cuts `limit + 1` fetched rows to a page. */
export function toPage<Row, T>(
  rows: readonly Row[],
  limit: number,
  toItem: (row: Row) => T,
  keyOf: (row: Row) => readonly (string | number | null)[],
): Page<T> {
  const shown = rows.slice(0, limit)
  const last = shown.at(-1)
  return {
    items: shown.map(toItem),
    nextCursor: rows.length > limit && last !== undefined ? encodeCursor(keyOf(last)) : null,
  }
}
