import type { ExposureKind, ExposureReadingDto } from '@/lib/conditions/schema'

export type ExposureRow = {
  id: string
  kind: ExposureKind
  subject: string
  at: Date | string
  value: number
  wet_bulb_c: number | null
  globe_c: number | null
  by_name: string
}

export const exposureSelect = `
  select e.id, e.kind, e.subject, e.at, e.value, e.wet_bulb_c, e.globe_c, a.name as by_name
    from exposure_readings e join accounts a on a.id = e.account_id`

export function toExposureReading(row: ExposureRow): ExposureReadingDto {
  return {
    id: row.id,
    kind: row.kind,
    subject: row.subject,
    at: new Date(row.at).toISOString(),
    value: row.value,
    wetBulbC: row.wet_bulb_c,
    globeC: row.globe_c,
    by: row.by_name,
  }
}
