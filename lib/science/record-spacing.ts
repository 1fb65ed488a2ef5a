/** The room's usual 5 readings a second: when a record is too short to tell. */
export const usualSpacingS = 0.2

const blocks = 12
/** A block with fewer steps says nothing. */
const leastSteps = 8

/**
 * Nominal time between readings of a record that does not state it, s: the median step of the slowest twelfth. A
 * record may begin at one reading a second and go on at five; its slow part is no gap.
 *
 * @param atMs ms, never falling
 */
export function recordSpacingS(atMs: ArrayLike<number>): number {
  const first = atMs[0] ?? 0
  const spanMs = (atMs[atMs.length - 1] ?? 0) - first
  if (!(spanMs > 0)) return usualSpacingS
  const steps: number[][] = Array.from({ length: blocks }, () => [])
  const all: number[] = []
  for (let i = 1; i < atMs.length; i += 1) {
    const at = atMs[i] ?? 0
    const stepMs = at - (atMs[i - 1] ?? 0)
    if (!(stepMs > 0)) continue
    all.push(stepMs)
    steps[Math.min(blocks - 1, Math.floor((blocks * (at - first)) / spanMs))]?.push(stepMs)
  }
  const told = steps.filter((block) => block.length >= leastSteps).map(median)
  if (told.length > 0) return Math.max(...told) / 1000
  return all.length > 0 ? median(all) / 1000 : usualSpacingS
}

/** The lower middle one of the values: of 2 the smaller. */
function median(values: number[]): number {
  const sorted = Float64Array.from(values).sort()
  return sorted[(sorted.length - 1) >> 1] ?? NaN
}
