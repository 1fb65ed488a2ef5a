import type { PutEffect, RoleCurve } from '@/lib/live/role-curve'
import { createRoleCurve } from '@/lib/live/role-curve'
import type { SignalRules, TroubleCode, UnchangedRun } from '@/lib/science/signal-trouble'
import { createSignalCheck, isStuck, troubleCodes } from '@/lib/science/signal-trouble'

/**
 * A role's curve as it is believed: readings that are stuck or jump stand as NaN. The same function of what has come
 * as `checkCurve` is of a stored record, so the live dose and the score agree.
 */
export type CheckedCurve = RoleCurve & {
  /** Why a reading is none though one came; 0 for those that are taken. */
  troubleAt: (i: number) => TroubleCode
  /** As it came, whatever is thought of it. */
  readonly raw: RoleCurve
  /**
   * Asks the witness (as it came) about what stands still, and looks through everything again when something came
   * late. Answers the indices whose reading is another than before, rising.
   */
  settle: (witness: RoleCurve | null) => number[]
}

/** A run with what the witness said of it so far. */
type Judged = { run: UnchangedRun; isStuck: boolean; markedTo: number }

export function createCheckedCurve(rules: SignalRules): CheckedCurve {
  const raw = createRoleCurve()
  let check = createSignalCheck(rules)
  let trouble = new Uint8Array(4_096)
  let judged: Judged[] = []
  let isOutOfOrder = false
  let lengthBefore = 0

  const codeAt = (i: number): TroubleCode => {
    const code = i < raw.length ? trouble[i] : 0
    return code === troubleCodes.step || code === troubleCodes.stuck ? code : troubleCodes.none
  }
  const tempC = (i: number) => (codeAt(i) === troubleCodes.none ? raw.tempC(i) : NaN)
  const makeRoom = () => {
    if (raw.length <= trouble.length) return
    const wider = new Uint8Array(trouble.length * 2)
    wider.set(trouble)
    trouble = wider
  }
  const takeNext = (i: number) => {
    const isStep = check.take(raw.atMs(i) / 1000, raw.tempC(i))
    const newest = check.longRuns.at(-1)
    if (newest !== undefined && judged.at(-1)?.run !== newest) {
      judged.push({ run: newest, isStuck: false, markedTo: newest.from })
    }
    const last = judged.at(-1)
    // A run that is known to be stuck goes on so.
    if (last !== undefined && last.isStuck && last.run.to === i) {
      last.markedTo = i
      trouble[i] = troubleCodes.stuck
    } else trouble[i] = isStep ? troubleCodes.step : troubleCodes.none
  }
  const put = (atMs: number, value: number): PutEffect => {
    const effect = raw.put(atMs, value)
    if (effect === 'same') return effect
    makeRoom()
    const isShorter = raw.length <= lengthBefore && effect !== 'changed'
    lengthBefore = raw.length
    if (effect === 'appended' && !isOutOfOrder && !isShorter) takeNext(raw.length - 1)
    else if (effect === 'appended') trouble[raw.length - 1] = troubleCodes.none
    if (effect !== 'appended' || isShorter) isOutOfOrder = true
    if (effect === 'inserted') {
      const i = raw.indexFrom(atMs)
      trouble.copyWithin(i + 1, i, raw.length - 1)
      trouble[i] = troubleCodes.none
    }
    return effect
  }
  const judge = (witness: RoleCurve | null): number[] => {
    const changed: number[] = []
    for (const one of judged) {
      if (one.isStuck && one.markedTo === one.run.to) continue
      one.isStuck ||= witness !== null && isStuck(one.run, witnessOf(witness, one.run), rules)
      if (!one.isStuck) continue
      for (let i = one.markedTo + 1; i <= one.run.to; i += 1) {
        if (!Number.isNaN(tempC(i))) changed.push(i)
        trouble[i] = troubleCodes.stuck
      }
      one.markedTo = one.run.to
    }
    return changed
  }
  const lookThroughAgain = (witness: RoleCurve | null): number[] => {
    const before = trouble.slice(0, raw.length)
    check = createSignalCheck(rules)
    judged = []
    isOutOfOrder = false
    for (let i = 0; i < raw.length; i += 1) takeNext(i)
    judge(witness)
    const changed: number[] = []
    for (let i = 0; i < raw.length; i += 1) {
      if ((before[i] === troubleCodes.none) !== (codeAt(i) === troubleCodes.none)) changed.push(i)
    }
    return changed
  }
  return {
    get length() {
      return raw.length
    },
    atMs: raw.atMs,
    tempC,
    raw,
    put,
    indexFrom: raw.indexFrom,
    since: (fromMs) => {
      const from = raw.indexFrom(fromMs)
      const read = raw.since(fromMs)
      return {
        atMs: read.atMs,
        tempC: read.tempC.map((value, i) => (codeAt(from + i) === troubleCodes.none ? value : NaN)),
      }
    },
    troubleAt: codeAt,
    settle: (witness) => (isOutOfOrder ? lookThroughAgain(witness) : judge(witness)),
  }
}

/** The witness over a run, as the check takes it. */
function witnessOf(witness: RoleCurve, run: UnchangedRun): { timeS: number[]; tempC: number[] } {
  const timeS: number[] = []
  const tempC: number[] = []
  for (let i = witness.indexFrom(run.fromS * 1000); i < witness.length; i += 1) {
    const atS = witness.atMs(i) / 1000
    if (atS > run.toS) break
    timeS.push(atS)
    tempC.push(witness.tempC(i))
  }
  return { timeS, tempC }
}
