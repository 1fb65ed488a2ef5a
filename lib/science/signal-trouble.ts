import { requireEqualLength } from './domain'
import type { SiteRules } from './site-rules'

/**
 * Readings that came and yet are none: a probe that is stuck, and one that jumps faster than wood can change. Both
 * are told from a probe's own readings in time order, whatever order they came in, so that what the fireside showed
 * and what the score counts are the same.
 */

export type SignalRules = SiteRules['signals']

/** What a reading is taken for. */
export const troubleCodes = { none: 0, step: 1, stuck: 2 } as const
export type TroubleCode = (typeof troubleCodes)[keyof typeof troubleCodes]

/** Readings `from` to `to` (indices, both in it) that stay within the quantum; the last run may go on. */
export type UnchangedRun = { from: number; to: number; fromS: number; toS: number }

export type SignalCheck = {
  /** Takes the next reading of a probe, in time order, NaN for none; true when it is an implausible step. */
  take: (timeS: number, tempC: number) => boolean
  /** Runs that have lasted for `stuckAfterS`, oldest first. Whether they are stuck, the coals decide. */
  readonly longRuns: readonly UnchangedRun[]
}

/** After a jump readings agree when they lie within this share of the step. */
const agreeShare = 0.25

/**
 * Follows one probe. Step: a reading further from the last believed one than `stepC` times the seconds since the
 * last reading (1 s at least). A jump is believed once readings have agreed with each other for `stepAgreeS`; what
 * came until then stays no reading. Run: readings within `stuckWithinC` of each other, without a silence longer than
 * `stuckAfterS`.
 */
export function createSignalCheck(rules: SignalRules): SignalCheck {
  const isStep = createStepCheck(rules)
  const longRuns: UnchangedRun[] = []
  let run: (UnchangedRun & { lowC: number; highC: number }) | null = null
  let open: UnchangedRun | null = null
  let index = -1
  const follow = (timeS: number, tempC: number) => {
    if (Number.isNaN(tempC)) {
      run = null
      return
    }
    const lowC = Math.min(tempC, run?.lowC ?? tempC)
    const highC = Math.max(tempC, run?.highC ?? tempC)
    if (run === null || highC - lowC > rules.stuckWithinC || timeS - run.toS > rules.stuckAfterS) {
      run = { from: index, to: index, fromS: timeS, toS: timeS, lowC: tempC, highC: tempC }
      open = null
      return
    }
    Object.assign(run, { to: index, toS: timeS, lowC, highC })
    if (open !== null) Object.assign(open, { to: index, toS: timeS })
    else if (timeS - run.fromS >= rules.stuckAfterS) {
      open = { from: run.from, to: index, fromS: run.fromS, toS: timeS }
      longRuns.push(open)
    }
  }
  return {
    take: (timeS, tempC) => {
      index += 1
      if (!rules.areChecked) return false
      follow(timeS, tempC)
      return isStep(timeS, tempC)
    },
    longRuns,
  }
}

type Agreement = { fromS: number; lowC: number; highC: number }

function createStepCheck(rules: SignalRules): (timeS: number, tempC: number) => boolean {
  let believedC = NaN
  let lastS = NaN
  let agreed: Agreement | null = null
  const believe = (tempC: number) => {
    believedC = tempC
    agreed = null
  }
  return (timeS, tempC) => {
    if (Number.isNaN(tempC)) {
      agreed = null
      return false
    }
    const mayChangeC = rules.stepC * Math.max(1, timeS - lastS)
    lastS = timeS
    if (Number.isNaN(believedC) || Math.abs(tempC - believedC) <= mayChangeC) {
      believe(tempC)
      return false
    }
    agreed = agreeWith(agreed, timeS, tempC, rules.stepC * agreeShare)
    if (timeS - agreed.fromS < rules.stepAgreeS) return true
    believe(tempC)
    return false
  }
}

function agreeWith(before: Agreement | null, timeS: number, tempC: number, withinC: number): Agreement {
  const lowC = Math.min(tempC, before?.lowC ?? tempC)
  const highC = Math.max(tempC, before?.highC ?? tempC)
  if (before === null || highC - lowC > withinC) return { fromS: timeS, lowC: tempC, highC: tempC }
  return { fromS: before.fromS, lowC, highC }
}

export type Curve = { timeS: ArrayLike<number>; tempC: ArrayLike<number> }

/**
 * True when the witness (the coals, or the opposite probe where no coals are read) moved while a probe did not. A bath
 * that stands still is no fault: then the witness stands still too.
 */
export function isStuck(run: UnchangedRun, witness: Curve, rules: SignalRules): boolean {
  let lowC = Infinity
  let highC = -Infinity
  for (let i = firstAt(witness.timeS, run.fromS); i < witness.timeS.length; i += 1) {
    if ((witness.timeS[i] ?? Infinity) > run.toS) break
    const tempC = witness.tempC[i] ?? NaN
    if (Number.isNaN(tempC)) continue
    lowC = Math.min(lowC, tempC)
    highC = Math.max(highC, tempC)
  }
  return highC - lowC >= rules.stuckWitnessC
}

/** First index at or after a time. */
function firstAt(timeS: ArrayLike<number>, wantedS: number): number {
  let low = 0
  let high = timeS.length
  while (low < high) {
    const middle = (low + high) >> 1
    if ((timeS[middle] ?? 0) < wantedS) low = middle + 1
    else high = middle
  }
  return low
}

export type CheckedCurve = {
  /** As given, and NaN where a reading is none. */
  tempC: Float64Array
  trouble: Uint8Array
}

/**
 * A whole record checked at once: the same as `createSignalCheck` reading by reading. The first reading of a stuck run
 * was still true and stays.
 *
 * @throws RangeError for arrays of unequal length
 */
export function checkCurve(curve: Curve, witness: Curve | null, rules: SignalRules): CheckedCurve {
  requireEqualLength('timeS', curve.timeS, 'tempC', curve.tempC)
  const check = createSignalCheck(rules)
  const tempC = Float64Array.from(curve.tempC)
  const trouble = new Uint8Array(tempC.length)
  for (let i = 0; i < tempC.length; i += 1) {
    if (check.take(curve.timeS[i] ?? NaN, tempC[i] ?? NaN)) trouble[i] = troubleCodes.step
  }
  for (const run of check.longRuns) {
    if (witness !== null && isStuck(run, witness, rules)) {
      trouble.fill(troubleCodes.stuck, run.from + 1, run.to + 1)
    }
  }
  trouble.forEach((code, i) => {
    if (code !== troubleCodes.none) tempC[i] = NaN
  })
  return { tempC, trouble }
}

/** True when a record stood still for so long that its witness has to be asked. */
export function hasLongRun(curve: Curve, rules: SignalRules): boolean {
  const check = createSignalCheck(rules)
  for (let i = 0; i < curve.timeS.length; i += 1) check.take(curve.timeS[i] ?? NaN, curve.tempC[i] ?? NaN)
  return check.longRuns.length > 0
}
