import { fromShownTemp, toShownTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

/** Steps and anchors that give figures a person would say aloud: 60, 100, 140 °C; 150, 200, 250 °F. */
const temperatureSteps: Record<TemperatureUnit, { steps: readonly number[]; anchor: number }> = {
  C: { steps: [5, 10, 20, 40, 80, 160], anchor: 100 },
  F: { steps: [10, 20, 50, 100, 200], anchor: 100 },
}

/** Ticks of the temperature axis, °C, at round figures of the person's unit, at most `most` of them. */
export function temperatureTicksC(
  lowC: number,
  highC: number,
  unit: TemperatureUnit,
  most: number,
): number[] {
  const low = toShownTemp(lowC, unit)
  const high = toShownTemp(highC, unit)
  const { steps, anchor } = temperatureSteps[unit]
  const step =
    steps.find((candidate) => countTicks(low, high, candidate, anchor) <= most) ?? steps.at(-1) ?? 100
  const ticks: number[] = []
  for (let shown = anchor + Math.ceil((low - anchor) / step) * step; shown <= high; shown += step) {
    ticks.push(fromShownTemp(shown, unit))
  }
  return ticks
}

function countTicks(low: number, high: number, step: number, anchor: number): number {
  return Math.floor((high - anchor) / step) - Math.ceil((low - anchor) / step) + 1
}

const minuteSteps = [1, 2, 5, 10, 15, 20, 30, 60, 120]

/** Ticks of the time axis, s, no nearer than `minPx` to each other. */
export function timeTicksS(xMaxS: number, widthPx: number, minPx: number): number[] {
  const most = Math.max(widthPx / minPx, 1)
  const stepS = 60 * (minuteSteps.find((minutes) => xMaxS / 60 / minutes <= most) ?? 240)
  return Array.from({ length: Math.floor(xMaxS / stepS + 1e-9) + 1 }, (_, i) => i * stepS)
}

/** Ticks of the depth axis, mm. */
export function depthTicksMm(depthMaxMm: number, heightPx: number, minPx: number): number[] {
  const steps = depthMaxMm >= 10 ? [5, 10, 15] : [1, 2, 5]
  const stepMm = steps.find((step) => (heightPx / depthMaxMm) * step >= minPx) ?? 20
  return Array.from({ length: Math.floor(depthMaxMm / stepMm + 1e-9) + 1 }, (_, i) => i * stepMm)
}
