import { Pair } from '@/components/chart/pair'
import type { PairSeries } from '@/components/chart/pair-types'
import type { ComparedFiring } from '@/lib/firings/compare-firings'
import { formatNumber, formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

/** All leads in one picture, each with its name at its end; the first's plan beneath. */
export function OverlayPair({
  firings,
  pickedId,
  unit,
}: {
  firings: readonly ComparedFiring[]
  pickedId: string | null
  unit: TemperatureUnit
}) {
  const first = firings[0]
  if (first === undefined) return null
  const others = firings.slice(1)
  const names = overlayNames(firings)
  const lineOf = (one: ComparedFiring): PairSeries => ({
    ...one.curves.lead,
    name: names.get(one.firing.id) ?? '',
    isSelected: one.firing.id === pickedId,
  })
  const depthMm = first.firing.recipeCopy?.content.leadPlace.depthMm ?? 0
  return (
    <Pair
      size="large"
      className="h-[560px]"
      title={`${firings.length} firings over one another`}
      planBand={first.curves.planBand}
      planName=""
      stages={first.curves.stages}
      lead={lineOf(first)}
      others={others.map(lineOf)}
      dose={{
        ...first.curves.dose,
        title: `Dose at ${formatNumber(depthMm, depthMm % 1 === 0 ? 0 : 1)} mm, minutes at ${formatTemp(first.rules.dose.refTempC, unit)}`,
        plan: first.curves.planDose,
        others: others.map((one) => ({ ...one.curves.dose, name: names.get(one.firing.id) ?? '' })),
      }}
      unit={unit}
    />
  )
}

/** Serials; a piece that was fired twice is told apart by its firing's place in the order. */
export function overlayNames(firings: readonly ComparedFiring[]): Map<string, string> {
  const serials = firings.map((one) => one.firing.piece.serial)
  return new Map(
    firings.map((one, i) => {
      const serial = one.firing.piece.serial
      const isTwice = serials.filter((other) => other === serial).length > 1
      const nth = serials.slice(0, i + 1).filter((other) => other === serial).length
      return [one.firing.id, isTwice ? `${serial} (${nth})` : serial]
    }),
  )
}
