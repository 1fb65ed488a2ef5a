import { formatDoseFigure, formatDoseRange, formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

/** A dose with its range; never without one unless it is a plan's, which is exact. */
export function DoseFigure({
  equivalentMin,
  range,
  refTempC = 200,
  unit,
  isUnitHidden = false,
}: {
  equivalentMin: number | null
  range?: { lowMin: number; highMin: number } | null
  refTempC?: number
  unit: TemperatureUnit
  /** In a table whose head says the unit. */
  isUnitHidden?: boolean
}) {
  if (equivalentMin === null) return <span className="text-mute">no dose</span>
  return (
    <span>
      {formatDoseFigure(equivalentMin)}
      {isUnitHidden ? null : `\u00a0min at ${formatTemp(refTempC, unit)}`}
      {range ? <span className="whitespace-nowrap text-soft"> ({formatDoseRange(range)})</span> : null}
    </span>
  )
}
