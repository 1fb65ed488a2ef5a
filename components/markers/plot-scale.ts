import { roundTicks } from '@/components/chart/round-ticks'

/** A plot's axis: from data to px, with round ticks. */
export type PlotScale = { toPx: (value: number) => number; ticks: number[] }

/** An axis over [low, high] widened by `margin` of its length, drawn from `fromPx` to `toPx`. */
export function linearScale(
  values: readonly number[],
  fromPx: number,
  toPx: number,
  { most = 5, margin = 0.06, from = null }: { most?: number; margin?: number; from?: number | null } = {},
): PlotScale {
  const lowest = Math.min(...values)
  const highest = Math.max(...values)
  const spread = highest > lowest ? highest - lowest : Math.abs(highest) || 1
  const low = from ?? lowest - margin * spread
  const high = highest + margin * spread
  return {
    toPx: (value) => fromPx + ((value - low) / (high - low)) * (toPx - fromPx),
    ticks: roundTicks(low, high, most),
  }
}

/** The same with even steps for even ratios; every value above 0. */
export function logScale(values: readonly number[], fromPx: number, toPx: number): PlotScale {
  const low = Math.log10(Math.min(...values)) - 0.04
  const high = Math.log10(Math.max(...values)) + 0.04
  const all = Array.from({ length: 12 }, (_, power) =>
    [1, 2, 5].map((digit) => digit * 10 ** (power - 5)),
  ).flat()
  const inside = all.filter((tick) => Math.log10(tick) >= low && Math.log10(tick) <= high)
  const tens = inside.filter(
    (tick) => Number.isInteger(Math.log10(tick) + 1e-12) || Math.log10(tick) % 1 === 0,
  )
  return {
    toPx: (value) => fromPx + ((Math.log10(value) - low) / (high - low)) * (toPx - fromPx),
    ticks: (inside.length > 7 && tens.length >= 2 ? tens : inside).map((tick) => Number(tick.toPrecision(1))),
  }
}
