import { doseFactorFromOffset } from '@/lib/science/dose-ratio'
import { equivalentMinutes, type CurvePoint, type DoseModel } from '@/lib/science/heat-dose'
import { defaultSiteRules } from '@/lib/science/site-rules'
import { burningShare, heatKwOf, MOST_GLOWING_KG, type Coals } from './coals'
import type { Random } from './random'
import { planDurationS, planTempC, stageStartS, type CueAction, type HearthRecipe } from './recipe'

export type HearthPhase = 'preheating' | 'bending' | 'toasting' | 'resting' | 'finished'

/** Something done to the fire or the barrel. Setting the draught is seen by nobody and carries no mark. */
export type ToasterAct = { kind: 'draught'; draught: number } | { kind: CueAction; kg?: number }

/** What the toaster sees. Temperatures as the probes show them, °C. */
export type ToasterView = {
  timeS: number
  phase: HearthPhase
  phaseTimeS: number
  stageIndex: number
  stageTimeS: number
  leadTempC: number
  oppositeTempC: number
  climbCPerMin: number
  doseMin: number
  coals: Readonly<Coals>
}

/** What the toaster decides: acts on the fire, and whether the phase or stage is over. */
export type ToasterTurn = { acts: ToasterAct[]; isStageOver: boolean; isPhaseOver: boolean }

export type Toaster = { tend: (view: ToasterView) => ToasterTurn; planDoseMin: number }

export const HEARTH_DOSE_MODEL: DoseModel = defaultSiteRules.dose

/** A toaster's hand, drawn once for each firing. */
type Hand = {
  skill: number
  /** Between two looks at the fire. */
  lookEveryS: number
  /** How far ahead the climb is carried on in the mind. */
  foresightS: number
  /** Reads the wanted temperature this much too high or low all along. */
  biasC: number
  /** Of the heat that practice says will be needed. */
  judgement: number
  forgetfulness: number
  lateS: number
}

const FEED_AT_LEAST_EVERY_S = 70
const STIR_AT_MOST_EVERY_S = 150
const MIST_AT_MOST_EVERY_S = 150
const TURN_AT_MOST_EVERY_S = 240
const OVERDUE_CUE_S = 90
const CONTROL_KW_PER_C = 0.36
const CONTROL_KW_PER_C_S = 0.0007
const LEAST_HEAT_KW = 1.5
const MOST_HEAT_KW = 19
/** Of what the coals give at this draught, practice keeps enough glowing. */
const USUAL_DRAUGHT = 0.5

/** A virtual toaster: skill 0 (first week) to 1 (steady for years). Acts on the simulated fire only. */
export function createToaster(options: { recipe: HearthRecipe; skill: number; random: Random }): Toaster {
  const { recipe, random } = options
  const hand = drawHand(options.skill, random)
  const planDoseMin = doseOfPlan(recipe)
  const never = -Infinity
  const last = { lookS: never, feedS: never, stirS: never, mistS: never, turnS: never, liftS: never }
  const doneCues = new Set<string>()
  let heldBackKw = 0
  let stageLateS = drawLateness(hand, random)
  let stageSeen = -1
  let nextLookInS = 0

  const lookAtFire = (view: ToasterView): ToasterAct[] => {
    const { timeS } = view
    const sinceS = Math.min(60, timeS - last.lookS)
    last.lookS = timeS
    nextLookInS = hand.lookEveryS * random.between(0.6, 1.4)
    // A mist or a lift drops the reading for a moment; who has just done it does not chase that.
    const isCalm = timeS - last.mistS > 60 && timeS - last.liftS > 90
    const climbCPerMin = isCalm ? view.climbCPerMin : 0
    const errorC = expectedErrorC({ ...view, climbCPerMin }, recipe, hand)
    heldBackKw = clamp(heldBackKw + CONTROL_KW_PER_C_S * errorC * sinceS, -2.5, 2.5)
    const practiceKw = hand.judgement * practicedHeatKw(view, recipe, hand.foresightS)
    const wantedKw = clamp(practiceKw + CONTROL_KW_PER_C * errorC + heldBackKw, LEAST_HEAT_KW, MOST_HEAT_KW)
    const draught = draughtFor(view.coals, wantedKw)
    return [{ kind: 'draught', draught }, ...handiwork(view, errorC, wantedKw, draught)]
  }
  const handiwork = (view: ToasterView, errorC: number, wantedKw: number, draught: number): ToasterAct[] => {
    const acts: ToasterAct[] = []
    const { coals, timeS } = view
    const soonKw = Math.max(wantedKw, hand.judgement * practicedHeatKw(view, recipe, 150) + heldBackKw)
    const wantedKg = Math.min(MOST_GLOWING_KG, soonKw / heatKwOf(1, 0.35 + 1.3 * USUAL_DRAUGHT))
    const shortKg = wantedKg - coals.glowingKg - 0.7 * coals.freshKg
    if (shortKg > 0.14 && timeS - last.feedS > FEED_AT_LEAST_EVERY_S) {
      last.feedS = timeS
      acts.push({ kind: 'feed', kg: clamp(shortKg / 0.7, 0.2, 0.6) })
    }
    const isFireDull = coals.ash > 0.28 || (draught > 0.95 && errorC > 3)
    if (isFireDull && timeS - last.stirS > STIR_AT_MOST_EVERY_S) {
      last.stirS = timeS
      acts.push({ kind: 'stir' })
    }
    if (errorC < -9 && draught < 0.1 && view.leadTempC > 110 && timeS - last.mistS > MIST_AT_MOST_EVERY_S) {
      last.mistS = timeS
      acts.push({ kind: 'mist' })
    }
    const unevenC = Math.abs(view.leadTempC - view.oppositeTempC)
    const isUneven = unevenC > 4 + 8 * (1 - hand.skill)
    if (isUneven && view.leadTempC > 90 && timeS - last.turnS > TURN_AT_MOST_EVERY_S) {
      last.turnS = timeS
      acts.push({ kind: 'turn' })
    }
    return acts
  }
  const followCues = (view: ToasterView): ToasterAct[] => {
    const stage = recipe.stages[view.stageIndex]
    if (stage === undefined) return []
    const acts: ToasterAct[] = []
    stage.cues.forEach((cue, i) => {
      const key = `${view.stageIndex}/${i}`
      if (doneCues.has(key) || view.stageTimeS < cue.minute * 60 + hand.lateS) return
      doneCues.add(key)
      // Taken over in the middle of a stage: what was long due has been done.
      if (view.stageTimeS > cue.minute * 60 + hand.lateS + OVERDUE_CUE_S) return
      const kind = cueAction(cue.action)
      if (kind === null || random.chance(hand.forgetfulness)) return
      acts.push({ kind })
      if (kind === 'mist') last.mistS = view.timeS
      if (kind === 'turn over') last.liftS = view.timeS
      if (kind === 'stir') last.stirS = view.timeS
      if (kind === 'feed') last.feedS = view.timeS
    })
    return acts
  }
  const setLid = (view: ToasterView): ToasterAct[] => {
    const stage = recipe.stages[view.stageIndex]
    if (stage === undefined || stageSeen === view.stageIndex) return []
    stageSeen = view.stageIndex
    if ((stage.lid === 'on') === view.coals.isLidOn) return []
    return [{ kind: stage.lid === 'on' ? 'lid on' : 'lid off' }]
  }

  return {
    planDoseMin,
    tend: (view) => {
      const acts = view.phase === 'toasting' ? [...setLid(view), ...followCues(view)] : []
      const isTending = view.phase === 'toasting' || view.phase === 'bending'
      if (isTending && view.timeS - last.lookS >= nextLookInS) acts.push(...lookAtFire(view))
      const isStageOver =
        view.phase === 'toasting' && isStageDone(view, recipe, hand, stageLateS, planDoseMin)
      if (isStageOver) stageLateS = drawLateness(hand, random)
      return { acts, isStageOver, isPhaseOver: isPhaseDone(view, recipe, hand) }
    },
  }
}

function drawHand(skill: number, random: Random): Hand {
  const lack = 1 - clamp(skill, 0, 1)
  return {
    skill: 1 - lack,
    lookEveryS: 6 + 50 * lack,
    foresightS: 70 - 45 * lack,
    biasC: random.gaussian() * 5 * lack,
    judgement: 1 + random.gaussian() * 0.45 * lack,
    forgetfulness: 0.35 * lack,
    lateS: 4 + 40 * lack * random.next(),
  }
}

function drawLateness(hand: Hand, random: Random): number {
  return 2 + Math.abs(random.gaussian()) * 70 * (1 - hand.skill)
}

/** Where the wood will stand against the plan, if it goes on climbing as now: above 0 is too cold. */
function expectedErrorC(view: ToasterView, recipe: HearthRecipe, hand: Hand): number {
  if (view.phase === 'bending') return recipe.planStartTempC - view.leadTempC - view.climbCPerMin * 0.8
  const aheadS = hand.foresightS
  const expectedC = view.leadTempC + (view.climbCPerMin * aheadS) / 60
  return wantedTempC(view, recipe, aheadS) + hand.biasC - expectedC
}

/** The plan `aheadS` from now, counted from where the stage really began. */
function wantedTempC(view: ToasterView, recipe: HearthRecipe, aheadS: number): number {
  return planTempC(recipe, plannedTimeS(view, recipe) + aheadS)
}

function plannedTimeS(view: ToasterView, recipe: HearthRecipe): number {
  const stage = recipe.stages[view.stageIndex]
  return stageStartS(recipe, view.stageIndex) + Math.min(view.stageTimeS, stage?.durationS ?? 0)
}

/** What practice says the wood will take: more for hot wood, more for a steep climb, less once it is soaked. */
function practicedHeatKw(view: ToasterView, recipe: HearthRecipe, aheadS: number): number {
  if (view.phase === 'bending') return 3
  const atS = plannedTimeS(view, recipe) + aheadS
  const tempC = planTempC(recipe, atS)
  const climbCPerMin = (planTempC(recipe, atS + 60) - planTempC(recipe, atS - 30)) / 1.5
  const soaked = 1 - 0.3 * clamp(atS / planDurationS(recipe), 0, 1)
  const underLid = view.coals.isLidOn ? 0.86 : 1
  return underLid * soaked * (7.5 + 0.044 * (tempC - 50) + 0.8 * Math.max(0, climbCPerMin))
}

/** The draught at which these coals give `wantedKw`; the inverse of `burningShare`. */
function draughtFor(coals: Readonly<Coals>, wantedKw: number): number {
  const atHalf = burningShare(coals) / (0.35 + 1.3 * coals.draught)
  const share = wantedKw / Math.max(0.5, heatKwOf(coals.glowingKg, atHalf))
  return clamp((share - 0.35) / 1.3, 0.02, 1)
}

/** A stage ends by its time; the last one by its dose as well, within two minutes, as far as skill sees it. */
function isStageDone(
  view: ToasterView,
  recipe: HearthRecipe,
  hand: Hand,
  lateS: number,
  planDoseMin: number,
): boolean {
  const durationS = recipe.stages[view.stageIndex]?.durationS ?? 0
  const isLast = view.stageIndex === recipe.stages.length - 1
  if (!isLast) return view.stageTimeS >= durationS + lateS
  const leewayS = Math.min(120, 0.12 * durationS) * hand.skill
  const isDosed = view.doseMin >= planDoseMin * doseFactorFromOffset(HEARTH_DOSE_MODEL, hand.biasC)
  if (isDosed) return view.stageTimeS >= durationS - leewayS
  return view.stageTimeS >= durationS + leewayS
}

function isPhaseDone(view: ToasterView, recipe: HearthRecipe, hand: Hand): boolean {
  const { phase, phaseTimeS } = view
  if (phase === 'preheating') return phaseTimeS >= recipe.preheat.minutes * 60 + hand.lateS
  if (phase === 'resting') return phaseTimeS >= recipe.restMinutes * 60 + hand.lateS
  if (phase !== 'bending') return false
  const pulledS = recipe.bend.minimumMinutes * 60 + hand.lateS
  const isReady = Math.abs(view.leadTempC - recipe.planStartTempC) < 3 + 4 * (1 - hand.skill)
  return phaseTimeS >= pulledS + (isReady ? 0 : 240)
}

function doseOfPlan(recipe: HearthRecipe): number {
  const points: CurvePoint[] = [{ timeS: 0, tempC: recipe.planStartTempC }]
  let timeS = 0
  for (const stage of recipe.stages) {
    timeS += stage.durationS
    points.push({ timeS, tempC: stage.targetTempC })
  }
  return equivalentMinutes(HEARTH_DOSE_MODEL, points)
}

/** Cues are written by people: "Lid on", "lid_on" and "lid on" are one. */
export function cueAction(text: string): CueAction | null {
  const words = text.toLowerCase().replaceAll(/[_-]/g, ' ').trim()
  const known: readonly CueAction[] = ['feed', 'stir', 'mist', 'lid on', 'lid off', 'turn', 'turn over']
  return known.find((action) => action === words) ?? null
}

function clamp(value: number, low: number, high: number): number {
  return Math.min(high, Math.max(low, value))
}
