import { DoseFigure } from '@/components/ui/dose-figure'
import { summedDose } from '@/lib/batches/summed-dose'
import type { FiringSummary } from '@/lib/firings/schema'
import type { TemperatureUnit } from '@/lib/format'

/** The doses of a barrel that was fired again. Only of two and more: said to be a sum, and held against no target. */
export function DoseSum({ firings, unit }: { firings: readonly FiringSummary[]; unit: TemperatureUnit }) {
  const sum = summedDose(firings)
  if (sum === null) return null
  const missing =
    sum.missingCount === 1
      ? ' One firing has no dose and is not in it, so the wood has had more.'
      : ` ${sum.missingCount} firings have no dose and are not in it, so the wood has had more.`
  return (
    <p className="mt-4">
      <span className="font-[640]">Sum of {sum.count} firings:</span>{' '}
      <DoseFigure
        equivalentMin={sum.doseMin}
        range={{ lowMin: sum.lowMin, highMin: sum.highMin }}
        unit={unit}
      />
      .{' '}
      <span className="text-soft">
        A sum of doses at the lead probe, not a dose of one fire: it has no target and no score.
        {sum.missingCount === 0 ? '' : missing}
      </span>
    </p>
  )
}
