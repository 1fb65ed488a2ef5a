import type { FiringState } from '@/lib/live/events'
import type { FiringFacts } from '@/lib/live/firing-facts'
import type { RoleCurve } from '@/lib/live/role-curve'
import type { StaveState } from '@/lib/science/stave'
import {
  columnDepthsMm,
  createStave,
  isothermDepthMm,
  roundDepthForShowMm,
  staveColumn,
  stepStave,
  toastDepthMm,
} from '@/lib/science/stave'
import { siteStaveOptions } from '@/lib/recipes/stave-of'

export type StaveColumn = NonNullable<FiringState['stave']>

/** The wood's picture keeps a column this often. */
const columnEveryS = 10
/** The wood does not move between readings closer than this. */
const shortestStepS = 1
/** Where no dose has counted there is no logarithm; the scale of the picture begins far above this. */
const lowestLog10 = -9
/** Late readings make the model start again, but not more often than this. */
const restartEveryMs = 20_000

export type LiveStave = {
  /** Takes in what the lead curve has grown by since the last call. */
  advance: (curve: RoleCurve, atMs: number) => void
  /** Readings came in before this index: the model starts again, soon. */
  touch: (index: number) => void
  newest: () => StaveColumn | null
  columns: () => StaveColumn[]
}

/** The stave under the lead probe since toast start; a model, marked so wherever it is shown. Null before the toast. */
export function createLiveStave(facts: FiringFacts): LiveStave {
  const { toastMs } = facts
  let state: StaveState | null = null
  let next = 0
  let lastMs = 0
  let kept: StaveColumn[] = []
  let isTouched = false
  let restartedAtMs = -Infinity

  const restart = (atMs: number) => {
    state = null
    next = 0
    kept = []
    isTouched = false
    restartedAtMs = atMs
  }
  const step = (at: number, tempC: number, startMs: number) => {
    if (state === null) {
      state = makeStave(facts, tempC)
      lastMs = startMs
    }
    const dtS = (at - lastMs) / 1000
    if (dtS < shortestStepS) return
    stepStave(state, tempC, dtS)
    lastMs = at
    const atS = (at - startMs) / 1000
    if (atS >= (kept.at(-1)?.atS ?? -Infinity) + columnEveryS) kept.push(columnOf(state, atS))
  }
  return {
    advance: (curve, atMs) => {
      if (toastMs === null) return
      if (isTouched && atMs - restartedAtMs > restartEveryMs) restart(atMs)
      for (; next < curve.length; next += 1) {
        const at = curve.atMs(next)
        const tempC = curve.tempC(next)
        if (at >= toastMs && !Number.isNaN(tempC)) step(at, tempC, toastMs)
      }
    },
    touch: (index) => {
      if (index < next) {
        isTouched = true
        // What was appended meanwhile has moved on by one.
        next += 1
      }
    },
    newest: () => (state === null || toastMs === null ? null : columnOf(state, (lastMs - toastMs) / 1000)),
    columns: () => kept,
  }
}

function makeStave(facts: FiringFacts, startTempC: number): StaveState {
  const { content, rules } = facts
  return createStave({
    thicknessMm: content.thicknessMm,
    probeDepthMm: Math.min(content.leadPlace.depthMm, content.thicknessMm * 0.9),
    moisturePercent: facts.moisturePercent ?? rules.stave.moisturePercent,
    startTempC,
    ...siteStaveOptions(rules),
  })
}

const toHundredth = (value: number) => Math.round(value * 100) / 100

function columnOf(state: StaveState, atS: number): StaveColumn {
  const depth = toastDepthMm(state).value
  const isotherm = (tempC: number) => {
    const depthMm = isothermDepthMm(state, tempC)
    return depthMm === null ? null : toHundredth(depthMm)
  }
  return {
    atS,
    depthsMm: columnDepthsMm(state.options.thicknessMm),
    log10Dose: Array.from(staveColumn(state), (log10) => Math.max(lowestLog10, toHundredth(log10))),
    isotherm100Mm: isotherm(100),
    isotherm150Mm: isotherm(150),
    toastDepthMm: depth > 0 ? roundDepthForShowMm(depth) : null,
  }
}
