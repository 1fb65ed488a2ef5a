import type { PieceDto } from '@/lib/batches/schema'

/** One row a piece with its newest firing and that firing's newest score. */
export const pieceSelect = `
  select p.id, p.kind, p.serial, p.position, p.queue_position, b.id as batch_id, b.number as batch_number, b.piece_count,
         b.wood_lot, b.size_and_shape, c.id as customer_id, c.name as customer_name, v.id as version_id,
         r.name as recipe_name, v.number as version_number, f.id as firing_id, f.state as firing_state, s.verdict,
         s.points, s.dose_minutes, s.dose_low_minutes, s.dose_high_minutes,
         (select count(*)::int from firings where piece_id = p.id and preheat_at is not null
             and state in ('finished', 'abandoned')) as fired_count
    from pieces p
    join batches b on b.id = p.batch_id
    join customers c on c.id = b.customer_id
    join recipe_versions v on v.id = b.recipe_version_id
    join recipes r on r.id = v.recipe_id
    left join lateral (select id, state from firings where piece_id = p.id order by queued_at desc, id desc limit 1) f
      on true
    left join lateral (select * from scores where firing_id = f.id order by number desc limit 1) s on true`

export type PieceRow = {
  id: string
  kind: 'barrel' | 'head'
  serial: string
  position: number
  queue_position: number
  batch_id: string
  batch_number: number
  piece_count: number
  wood_lot: string
  size_and_shape: string
  customer_id: string
  customer_name: string
  version_id: string
  recipe_name: string
  version_number: number
  firing_id: string | null
  firing_state: 'queued' | 'preheating' | 'bending' | 'toasting' | 'resting' | 'finished' | 'abandoned'
  verdict: string | null
  points: number | null
  dose_minutes: number | null
  dose_low_minutes: number | null
  dose_high_minutes: number | null
  fired_count: number
}

/** A piece as its customer sees it: how far it is, and nothing of the room's judgement before it is certified. */
export function toCustomerPiece(row: PieceRow): PieceDto {
  return toPiece({
    ...row,
    verdict: null,
    points: null,
    dose_minutes: null,
    dose_low_minutes: null,
    dose_high_minutes: null,
    fired_count: 0,
  })
}

/** A piece as an enrolled device with nobody signed in sees it: what comes next, and not whose it is. */
export function toDevicePiece(row: PieceRow): PieceDto {
  const piece = toCustomerPiece(row)
  return { ...piece, customer: { ...piece.customer, name: '' }, batch: { ...piece.batch, woodLot: '' } }
}

export function toPiece(row: PieceRow): PieceDto {
  return {
    id: row.id,
    kind: row.kind,
    serial: row.serial,
    position: row.position,
    batch: { id: row.batch_id, number: row.batch_number, pieceCount: row.piece_count, woodLot: row.wood_lot },
    customer: { id: row.customer_id, name: row.customer_name },
    recipe: { versionId: row.version_id, name: row.recipe_name, versionNumber: row.version_number },
    sizeAndShape: row.size_and_shape,
    firing:
      row.firing_id === null
        ? null
        : {
            id: row.firing_id,
            state: row.firing_state,
            verdict: row.verdict,
            points: row.points,
            doseMinutes: row.dose_minutes,
            doseLowMinutes: row.dose_low_minutes,
            doseHighMinutes: row.dose_high_minutes,
          },
    firedCount: row.fired_count,
    isWaiting: row.firing_id === null || row.firing_state === 'queued',
  }
}
