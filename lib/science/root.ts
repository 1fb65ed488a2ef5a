/**
 * Brent's root finder (R. P. Brent, Algorithms for Minimization without Derivatives, 1973, chapter 4): bisection that
 * takes a secant or inverse quadratic step whenever that is safe. Every inverse of this folder goes through it.
 *
 * `low` and `high` bracket a sign change of `valueAt`, which need not be smooth: at a jump the jump is found. By default
 * the root is found to the last few digits of a double; `toleranceX` stops sooner, for functions that cost a simulation.
 *
 * @returns x in [low, high]
 * @throws RangeError when `valueAt` has one sign at both ends, or is NaN there
 */
export function findRoot(
  valueAt: (x: number) => number,
  low: number,
  high: number,
  toleranceX = 1e-13,
): number {
  let a = low
  let fa = valueAt(a)
  let b = high
  let fb = valueAt(b)
  if (Number.isNaN(fa) || Number.isNaN(fb) || (fa !== 0 && fb !== 0 && fa > 0 === fb > 0)) {
    throw new RangeError(`low and high must bracket a sign change: ${fa} at ${low}, ${fb} at ${high}`)
  }
  let c = a
  let fc = fa
  let step = b - a
  let lastStep = step
  for (let i = 0; i < 200; i += 1) {
    if (fb > 0 === fc > 0) {
      c = a
      fc = fa
      step = b - a
      lastStep = step
    }
    if (Math.abs(fc) < Math.abs(fb)) {
      ;[a, b, c] = [b, c, b]
      ;[fa, fb, fc] = [fb, fc, fb]
    }
    const tolerance = 2 * Number.EPSILON * Math.abs(b) + toleranceX
    const half = (c - b) / 2
    if (Math.abs(half) <= tolerance || fb === 0) return b
    const trial =
      Math.abs(lastStep) >= tolerance && Math.abs(fa) > Math.abs(fb) ? interpolate(a, fa, b, fb, c, fc) : null
    if (
      trial !== null &&
      2 * Math.abs(trial) < Math.min(3 * Math.abs(half) - tolerance, Math.abs(lastStep)) &&
      trial * half > 0
    ) {
      lastStep = step
      step = trial
    } else {
      step = half
      lastStep = half
    }
    a = b
    fa = fb
    b += Math.abs(step) > tolerance ? step : Math.sign(half) * tolerance
    fb = valueAt(b)
  }
  return b
}

/** Step from b: secant when only two points are known, inverse quadratic through three. Null when it has no number. */
function interpolate(a: number, fa: number, b: number, fb: number, c: number, fc: number): number | null {
  const s = fb / fa
  if (a === c) {
    const secant = ((c - b) * s) / (1 - s)
    return Number.isFinite(secant) ? secant : null
  }
  const q = fa / fc
  const r = fb / fc
  const p = s * ((c - b) * q * (q - r) - (b - a) * (r - 1))
  const step = -p / ((q - 1) * (r - 1) * (s - 1))
  return Number.isFinite(step) ? step : null
}
