/** An interval about a dose, minutes at the reference temperature; half-widths in log10, k = 2. */
export type DoseBounds = {
  lowMin: number
  highMin: number
  /** Half-widths in log10, below and above; `log10Half` is the wider. Null when the dose is 0. */
  log10Low: number | null
  log10High: number | null
  log10Half: number | null
}

/** A dose and its two intervals: absolute for certificates, same mount for judging against the recipe. */
export type DoseResult = {
  doseMin: number
  /** Null when the dose is 0. */
  log10Dose: number | null
  /** Null when the probe's class makes no claim at these temperatures. */
  absolute: DoseBounds | null
  sameMount: DoseBounds
  /** The same-mount figure is the assumed one, not the site's own. */
  isAssumed: boolean
}
