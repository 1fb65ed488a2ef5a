import type { BatchDto } from '@/lib/batches/schema'

/** One row a batch, with the counts of its pieces' newest firings. */
export const batchSelect = `
  select b.id, b.number, b.customer_id, c.name as customer_name, b.recipe_version_id, r.name as recipe_name,
         v.number as version_number, b.piece_kind, b.size_and_shape, b.piece_count, b.wood_lot, b.due_week, b.notes,
         b.created_at, n.waiting, n.live, n.finished
    from batches b
    join customers c on c.id = b.customer_id
    join recipe_versions v on v.id = b.recipe_version_id
    join recipes r on r.id = v.recipe_id
    cross join lateral (
      select count(*) filter (where f.state = 'queued') as waiting,
             count(*) filter (where f.state in ('preheating', 'bending', 'toasting', 'resting')) as live,
             count(*) filter (where f.state = 'finished') as finished
        from pieces p
        join lateral (select state from firings where piece_id = p.id order by queued_at desc, id desc limit 1) f on true
       where p.batch_id = b.id) n`

export type BatchRow = {
  id: string
  number: number
  customer_id: string
  customer_name: string
  recipe_version_id: string
  recipe_name: string
  version_number: number
  piece_kind: 'barrel' | 'head'
  size_and_shape: string
  piece_count: number
  wood_lot: string
  due_week: string | null
  notes: string
  created_at: Date
  waiting: string
  live: string
  finished: string
}

export function toBatch(row: BatchRow): BatchDto {
  return {
    id: row.id,
    number: row.number,
    customer: { id: row.customer_id, name: row.customer_name },
    recipeVersionId: row.recipe_version_id,
    recipeName: row.recipe_name,
    versionNumber: row.version_number,
    pieceKind: row.piece_kind,
    sizeAndShape: row.size_and_shape,
    pieceCount: row.piece_count,
    waitingCount: Number(row.waiting),
    liveCount: Number(row.live),
    finishedCount: Number(row.finished),
    woodLot: row.wood_lot,
    dueWeek: row.due_week,
    notes: row.notes,
    createdAt: new Date(row.created_at).toISOString(),
  }
}
