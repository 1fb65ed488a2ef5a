import { formatClimb, formatTemp, formatTempDifference } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

/** A temperature, difference or climb rate in the person's unit; null says "no reading". */
export function Temperature({
  tempC,
  unit,
  kind = 'temperature',
  decimals = 0,
}: {
  tempC: number | null
  unit: TemperatureUnit
  kind?: 'temperature' | 'difference' | 'rate'
  decimals?: number
}) {
  if (tempC === null) return <span className="text-amber">no reading</span>
  if (kind === 'rate') return <span className="whitespace-nowrap">{formatClimb(tempC, unit)}</span>
  const text =
    kind === 'difference' ? formatTempDifference(tempC, unit, decimals) : formatTemp(tempC, unit, decimals)
  return <span className="whitespace-nowrap">{text}</span>
}
