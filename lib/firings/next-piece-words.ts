import type { NextPieceLine } from '@/lib/firings/schema'
import { formatNumber, formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { percentAboveFromLog10, percentBelowFromLog10 } from '@/lib/science/dose-ratio'

/** "Last 12 of this lot, first fire: 4 min slow to 150 °C (2 to 6); feed sooner." */
export function nextPieceWords(line: NextPieceLine, unit: TemperatureUnit): string {
  return `Last ${line.n} of ${groupWords(line)}: ${deviationWords(line, unit)}.`
}

function groupWords({ isSameLot, isSameFirst, isFirstOfDay }: NextPieceLine): string {
  const of = isSameLot ? 'this lot' : 'this recipe'
  if (!isSameFirst) return of
  return `${of}, ${isFirstOfDay ? 'first fire' : 'not the first fire'}`
}

function deviationWords(line: NextPieceLine, unit: TemperatureUnit): string {
  const isOver = line.value > 0
  if (line.what === 'minutes to temperature') {
    const range = rangeWords(line, (value) => Math.abs(value))
    const to = `to ${formatTemp(line.tempC ?? 0, unit)}`
    const minutes = `${wholeMinutes(Math.abs(line.value))} min`
    return isOver
      ? `${minutes} slow ${to} (${range}); feed sooner`
      : `${minutes} fast ${to} (${range}); feed later`
  }
  const range = rangeWords(line, percentOf)
  const percent = `${formatNumber(percentOf(line.value))} %`
  return isOver
    ? `dose ${percent} over its target (${range}); rest sooner`
    : `dose ${percent} under its target (${range}); hold longer`
}

function percentOf(log10: number): number {
  return log10 > 0 ? percentAboveFromLog10(log10) : percentBelowFromLog10(-log10)
}

/** Both ends lie on one side of 0, so the nearer one comes first. */
function rangeWords({ low, high }: NextPieceLine, show: (value: number) => number): string {
  const ends = [show(low), show(high)].sort((a, b) => a - b)
  return `${ends.map(wholeMinutes).join(' to ')}`
}

function wholeMinutes(value: number): string {
  return formatNumber(value, value < 1.5 ? 1 : 0)
}
