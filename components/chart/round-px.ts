/** A tenth of a pixel is finer than any screen; more digits only make a drawing's text longer. */
export function roundPx(px: number): number {
  return Math.round(px * 10) / 10
}
