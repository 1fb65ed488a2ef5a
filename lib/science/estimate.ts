/** A figure with the ends of its confidence interval, in the figure's own unit. */
export type Estimate = { value: number; low: number; high: number }

/** The confidence of every interval that says nothing else. */
export const USUAL_CONFIDENCE = 0.95
