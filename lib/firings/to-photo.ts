import type { PhotoKind } from '@/lib/firings/photo-kinds'
import type { PhotoDto } from '@/lib/firings/photo-schema'

export type PhotoRow = {
  id: string
  firing_id: string
  kind: PhotoKind
  caption: string
  width_px: number
  height_px: number
  byte_count: number
  added_at: Date
  by_name: string
  removed_at: Date | null
  removed_by_name: string | null
  removed_reason: string | null
}

export const photoSelect = `
  select o.id, o.firing_id, o.kind, o.caption, o.width_px, o.height_px, o.byte_count, o.added_at, a.name as by_name,
         o.removed_at, r.name as removed_by_name, o.removed_reason
    from firing_photos o
    join accounts a on a.id = o.account_id
    left join accounts r on r.id = o.removed_by`

export function toPhoto(row: PhotoRow): PhotoDto {
  return {
    id: row.id,
    firingId: row.firing_id,
    kind: row.kind,
    caption: row.caption,
    widthPx: row.width_px,
    heightPx: row.height_px,
    byteCount: row.byte_count,
    addedAt: new Date(row.added_at).toISOString(),
    by: row.by_name,
    removed:
      row.removed_at === null
        ? null
        : {
            at: new Date(row.removed_at).toISOString(),
            by: row.removed_by_name ?? '',
            reason: row.removed_reason ?? '',
          },
  }
}
