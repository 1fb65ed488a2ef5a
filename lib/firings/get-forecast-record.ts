import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { FORECAST_WITHIN_MIN } from '@/lib/firings/forecast-outcome'
import type { ForecastRecordDto } from '@/lib/firings/schema'
import { forecastRecord } from '@/lib/science/forecast-record'

/** The record is of so many firings, the newest that could be told. */
const recordOf = 30

/** How often the room's forecast was right lately; null while there are too few to say. */
export async function getForecastRecord(actor: Actor): Promise<{ record: ForecastRecordDto | null }> {
  requirePermission(actor, 'firings:follow')
  const rows = await queryRows<{ is_within: boolean }>(
    await forkEm(),
    `select o.is_within
       from firings f
       join lateral (select is_within, within_minutes from forecast_outcomes where firing_id = f.id
                      order by score_number desc limit 1) o on true
      where f.state = 'finished' and not f.is_imported and o.is_within is not null and o.within_minutes = ?
      order by f.toast_at desc, f.id desc limit ?`,
    [FORECAST_WITHIN_MIN, recordOf],
  )
  const record = forecastRecord(rows.map((row) => row.is_within))
  if (record === null) return { record: null }
  return {
    record: {
      n: record.n,
      rightCount: record.rightCount,
      withinMinutes: FORECAST_WITHIN_MIN,
      shareLow: record.share.low,
      shareHigh: record.share.high,
    },
  }
}
