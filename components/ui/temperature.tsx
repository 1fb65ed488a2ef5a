import {
  formatClimb,
  formatNumber,
  formatTemp,
  formatTempDifference,
  toShownDifference,
  toShownTemp,
} from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

/** A temperature, difference or climb rate in the person's unit; null says "no reading". */
export function Temperature({
  tempC,
  unit,
  kind = 'temperature',
  decimals = 0,
  isUnitHidden = false,
}: {
  tempC: number | null
  unit: TemperatureUnit
  kind?: 'temperature' | 'difference' | 'rate'
  decimals?: number
  /** In a table whose head says the unit. */
  isUnitHidden?: boolean
}) {
  if (tempC === null) return <span className="text-amber">no reading</span>
  if (kind === 'rate') return <span className="whitespace-nowrap">{formatClimb(tempC, unit)}</span>
  const isDifference = kind === 'difference'
  const text = isUnitHidden
    ? formatNumber(isDifference ? toShownDifference(tempC, unit) : toShownTemp(tempC, unit), decimals)
    : (isDifference ? formatTempDifference : formatTemp)(tempC, unit, decimals)
  return <span className="whitespace-nowrap">{text}</span>
}
