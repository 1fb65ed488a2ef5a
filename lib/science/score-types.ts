import type { DoseResult, ProbeErrorFacts } from './dose-interval'
import type { Gap, ReadingSeries } from './gaps'
import type { SiteRules } from './site-rules'
import type { DepthRangeMm } from './stave'

export type { ProbeCheck } from './dose-interval'

/** Shapes of a score: what `scoreFiring` reads and what it returns. All plain data, all JSON. Times: s from toast start. */

/** In the order in which they win when several hold. */
export type Verdict = 'incomplete' | 'limit broken' | 'out of tolerance' | 'cannot tell' | 'in tolerance'

/** Where a probe sits. Two curves are comparable only when all four agree. */
export type ProbePlace = { height: string; side: string; depthMm: number; mounting: string }

export type ScoreStage = {
  name: string
  kind: 'ramp' | 'hold'
  targetTempC: number
  minutes: number
  /** Half-width of the band, °C. */
  bandC: number
}

/** What a score needs of the recipe copy. A null limit or minimum is one that the recipe does not set. */
export type ScoreRecipe = {
  planStartTempC: number
  stages: readonly ScoreStage[]
  /** Minutes at the reference temperature; null takes the plan's own dose. */
  doseTargetMin: number | null
  doseToleranceLog10: number
  leadPlace: ProbePlace
  thicknessMm: number
  limits: { woodMaxTempC: number | null; climbMaxCPerMin: number | null; spreadMaxC: number | null }
  preheat: { moistureMinPercent: number | null; moistureMaxPercent: number | null; minutesMin: number | null }
  bend: { minutesMin: number | null }
}

/** What the firing's marks and notes say. Null: not marked or not measured. */
export type ScoreFiringFacts = {
  /** Rest start; null when the firing never came to rest. */
  restStartS: number | null
  /** `timeS` is where the stage of that index began; index 0 begins at the toast start and needs none. */
  stageMarks: readonly { stageIndex: number; timeS: number }[]
  preheatMinutes: number | null
  moisturePercent: number | null
  /** How the moisture was measured, in words. */
  moistureMethod: string | null
  /** How long the pull took, min. */
  bendMinutes: number | null
  roomTempC: number | null
  /** Oven-dry specific gravity of the wood lot. */
  specificGravity: number | null
  /** Changes of the lead probe. One at another place leaves the firing incomplete. */
  leadSwaps: readonly { timeS: number; isSamePlace: boolean }[]
}

/** The lead probe: type, class and check, with the place where it sat. */
export type ScoreProbe = ProbeErrorFacts & { place: ProbePlace }

export type ScoreInput = {
  recipe: ScoreRecipe
  firing: ScoreFiringFacts
  /** The lead probe, corrected, with whatever was read before the toast start (bend) and after rest start. */
  lead: ReadingSeries
  /** The opposite probe at the same height, or null. */
  opposite: ReadingSeries | null
  leadProbe: ScoreProbe
  rules: SiteRules
}

export type ScoreTermKey = 'dose' | 'inBand' | 'shape' | 'stageLengths' | 'spread' | 'preheatAndBend'

export type ScoreUnit = 'log10' | 'percent' | 'bands' | 'differenceC' | 'minutes' | 'percentMoisture'

export type ScoreTerm = {
  key: ScoreTermKey
  name: string
  isMeasured: boolean
  /** In `unit`; null when not measured. Dose is signed: above 0 is more than the target. */
  measured: number | null
  /** No loss within this, in `unit`; null when the recipe asks nothing. */
  allowed: number | null
  unit: ScoreUnit
  /** What the figure belongs to: the stage's name, or "bend", "preheat", "moisture". */
  detail: string | null
  /** To one decimal place, so that what is shown adds up; null when not measured or not scored. */
  pointsLost: number | null
  pointsOf: number
  sentence: string
}

export type BrokenLimit = {
  limit: 'wood maximum' | 'climb maximum'
  /** When it was first exceeded, s, and for how long in all, s. */
  atS: number
  heldS: number
  /** The worst value and the limit, °C or °C/min. */
  measured: number
  allowed: number
  sentence: string
}

export type MatchedStage = {
  name: string
  planMinutes: number
  actualMinutes: number
  startS: number
  endS: number
  /** The stage's start was marked by hand; otherwise it is the plan's time. */
  isMarked: boolean
}

export type Score = {
  ruleset: 1
  verdict: Verdict
  /** 0 to 100, to one decimal place; null when incomplete. */
  points: number | null
  /** Scored dose, toast start to rest start; null when there is nothing to integrate. */
  dose: DoseResult | null
  planDoseMin: number
  targetDoseMin: number
  toleranceLog10: number
  /** log10 of dose against target; null when there is no dose, or the record is incomplete and nothing is compared. */
  deltaLog10: number | null
  /** Dose before toast start and after rest start, min; null when nothing was read there. */
  bendDoseMin: number | null
  restDoseMin: number | null
  /** Minutes at the reference temperature with the two Arrhenius constants, firing and plan. */
  slowIndexMin: number | null
  fastIndexMin: number | null
  planSlowIndexMin: number
  planFastIndexMin: number
  /** Model estimate at rest start. */
  toastDepthMm: DepthRangeMm | null
  terms: ScoreTerm[]
  limitsBroken: BrokenLimit[]
  gaps: Gap[]
  stages: MatchedStage[]
  incompleteReasons: string[]
  /** Why this score: the verdict first, then each thing that moved it. */
  sentences: string[]
}
