/** Ticks at 1, 2 or 5 times a power of ten, at most `most` of them, from low to high. */
export function roundTicks(low: number, high: number, most: number): number[] {
  if (!(high > low)) return [low]
  const rough = (high - low) / most
  const power = 10 ** Math.floor(Math.log10(rough))
  const step = [1, 2, 5, 10].map((factor) => factor * power).find((one) => one >= rough) ?? rough
  const first = Math.ceil(low / step - 1e-9)
  const last = Math.floor(high / step + 1e-9)
  return Array.from({ length: last - first + 1 }, (_, i) => Number(((first + i) * step).toPrecision(12)))
}
