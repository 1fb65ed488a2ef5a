/** Plain linear scale for a small picture; a domain without width is opened a little, so that nothing divides by nought. */
export type LinearScale = (value: number) => number

export function linearScale(
  [from, to]: readonly [number, number],
  [start, end]: readonly [number, number],
): LinearScale {
  const span = to - from === 0 ? 1 : to - from
  return (value) => start + ((value - from) / span) * (end - start)
}

export type CorrectionPoint = {
  kind: 'ice' | 'boiling' | 'block'
  /** In the person's unit: a temperature, and differences. */
  atTemp: number
  correction: number
  half: number
  atMs: number
  /** Of its kind's newest occasion. */
  isNewest: boolean
}

/** A domain for corrections: every stem, and nought, with a little air. */
export function correctionDomain(points: readonly CorrectionPoint[]): readonly [number, number] {
  const low = Math.min(-0.5, ...points.map((point) => point.correction - point.half))
  const high = Math.max(0.5, ...points.map((point) => point.correction + point.half))
  const air = (high - low) * 0.08
  return [low - air, high + air]
}
