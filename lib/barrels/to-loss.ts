import type { LossDto } from '@/lib/barrels/schema'

export type LossRow = {
  id: string
  piece_id: string
  firing_id: string | null
  kind: LossDto['kind']
  stave_position: number | null
  wood_lot: string
  blister_place: LossDto['blisterPlace']
  blister_size_mm: number | null
  replaced_when: LossDto['replacedWhen']
  replacement_lot: string | null
  replacement_toast: string | null
  words: string
  at: Date
  by_name: string
  ended_id: string | null
  ended_kind: string | null
  ended_words: string | null
  ended_at: Date | null
  ended_by: string | null
}

/** A loss with what came in its place, if anything did. */
export const lossSelect = `
  select l.id, l.piece_id, l.firing_id, l.kind, l.stave_position, l.wood_lot, l.blister_place, l.blister_size_mm,
         l.replaced_when, l.replacement_lot, l.replacement_toast, l.words, l.at, a.name as by_name,
         n.id as ended_id, n.kind as ended_kind, n.words as ended_words, n.recorded_at as ended_at, b.name as ended_by
    from losses l
    join accounts a on a.id = l.account_id
    left join losses n on n.replaces_id = l.id
    left join accounts b on b.id = n.account_id
   where l.kind <> 'taken back'`

export function toLoss(row: LossRow): LossDto {
  const isTakenBack = row.ended_kind === 'taken back'
  return {
    id: row.id,
    pieceId: row.piece_id,
    firingId: row.firing_id,
    kind: row.kind,
    stavePosition: row.stave_position,
    woodLot: row.wood_lot,
    blisterPlace: row.blister_place,
    blisterSizeMm: row.blister_size_mm,
    replacedWhen: row.replaced_when,
    replacementLot: row.replacement_lot,
    replacementToast: row.replacement_toast,
    words: row.words,
    at: new Date(row.at).toISOString(),
    by: row.by_name,
    ended:
      row.ended_at === null
        ? null
        : {
            by: row.ended_by ?? '',
            at: new Date(row.ended_at).toISOString(),
            reason: isTakenBack ? row.ended_words : null,
            replacedById: isTakenBack ? null : row.ended_id,
          },
  }
}
