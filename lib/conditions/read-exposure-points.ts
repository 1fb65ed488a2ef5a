import type { EntityManager } from '@mikro-orm/postgresql'
import type { StandingPoint } from '@/lib/conditions/exposure-standing'
import type { ExposureKind } from '@/lib/conditions/schema'
import { queryRows } from '@/lib/db/orm'

type Row = { kind: ExposureKind; subject: string; at: Date | string; value: number; peak: number }

/** Every reading of carbon monoxide and heat in [from, until) that stands, in order of time. */
export async function readExposurePoints(
  em: EntityManager,
  fromAt: Date,
  untilAt: Date,
): Promise<StandingPoint[]> {
  const rows = await queryRows<Row>(
    em,
    `select kind, subject, at, value, peak from exposure_readings
      where removed_at is null and at >= ? and at < ? order by at`,
    [fromAt, untilAt],
  )
  return rows.map(({ at, ...row }) => ({ ...row, atMs: new Date(at).getTime() }))
}
