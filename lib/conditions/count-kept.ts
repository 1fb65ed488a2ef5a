import type { EntityManager } from '@mikro-orm/postgresql'
import type { ExposureKind } from '@/lib/conditions/schema'
import { queryRows } from '@/lib/db/orm'
import type { FoldedPoint } from '@/lib/science/exposure-record'

/** How many of these instants are kept of this subject already. */
export async function countKept(
  em: EntityManager,
  { kind, subject }: { kind: ExposureKind; subject: string },
  points: readonly FoldedPoint[],
): Promise<number> {
  const [row] = await queryRows<{ count: number }>(
    em,
    `select count(*)::integer as count from exposure_readings
      where kind = ? and lower(subject) = lower(?) and removed_at is null
        and at in (select to_timestamp(value::double precision / 1000) from jsonb_array_elements_text(?::jsonb))`,
    [kind, subject, JSON.stringify(points.map((point) => point.atMs))],
  )
  return row?.count ?? 0
}
