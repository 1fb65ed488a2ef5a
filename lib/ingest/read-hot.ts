import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import type { ReadingColumns } from '@/lib/ingest/reading-columns'
import { emptyColumns, sortColumns } from '@/lib/ingest/reading-columns'

export type Period = { fromMs: number; untilMs: number }

type HotRow = {
  at_ms: string
  emf_tenth_uv: number | null
  cold_centi_c: number | null
  temp_centi_c: number | null
  flag: number
}

/** Year 2286: later than any reading, and within what PostgreSQL's bigint and a Date can hold. */
const farMs = 1e13

/** One probe's readings that are still in the table, in periods (start included, end not), sorted. */
export async function readHot(
  em: EntityManager,
  probeNo: number,
  periods: readonly Period[],
): Promise<ReadingColumns> {
  const columns = emptyColumns()
  for (const period of periods) {
    const rows = await queryRows<HotRow>(
      em,
      `select at_ms, emf_tenth_uv, cold_centi_c, temp_centi_c, flag
         from readings where probe_no = ? and at_ms >= ? and at_ms < ?`,
      [probeNo, period.fromMs, Math.min(period.untilMs, farMs)],
    )
    for (const row of rows) {
      columns.atMs.push(Number(row.at_ms))
      columns.emfTenthUv.push(row.emf_tenth_uv)
      columns.coldCentiC.push(row.cold_centi_c)
      columns.tempCentiC.push(row.temp_centi_c)
      columns.flag.push(row.flag)
    }
  }
  return sortColumns(columns)
}
