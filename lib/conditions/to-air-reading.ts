import type { AirPlace, AirReadingDto } from '@/lib/conditions/schema'
import { equilibriumMoisturePercent } from '@/lib/science/wood'

export type AirRow = {
  id: string
  place: AirPlace
  at: Date | string
  temp_c: number
  humidity_percent: number
  by_name: string
}

export const airSelect = `
  select c.id, c.place, c.at, c.temp_c, c.humidity_percent, a.name as by_name
    from condition_readings c join accounts a on a.id = c.account_id`

export function toAirReading(row: AirRow): AirReadingDto {
  return {
    id: row.id,
    place: row.place,
    at: new Date(row.at).toISOString(),
    tempC: row.temp_c,
    humidityPercent: row.humidity_percent,
    equilibriumMoisturePercent: equilibriumOrNull(row.temp_c, row.humidity_percent),
    by: row.by_name,
  }
}

function equilibriumOrNull(tempC: number, humidityPercent: number): number | null {
  try {
    return equilibriumMoisturePercent(tempC, humidityPercent)
  } catch (error) {
    if (error instanceof RangeError) return null
    throw error
  }
}
