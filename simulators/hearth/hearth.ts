import { createDoseAccumulator, type DoseAccumulator } from '@/lib/science/heat-dose'
import { findRoot } from '@/lib/science/root'
import { createStave, fireFluxWPerM2, stepStave, type StaveState } from '@/lib/science/stave'
import { valueAt } from '@/lib/science/straight-line'
import type { ThermocoupleType } from '@/lib/science/thermocouple'
import type { Emf, ReadingFlag } from '@/lib/gateway/protocol'
import {
  createCoals,
  dryFace,
  feedCoals,
  fireAtFace,
  mistFace,
  settleCoals,
  stepCoals,
  stirCoals,
  type Coals,
} from './coals'
import { createRandom, type Random } from './random'
import { planTempC, stageStartS, type CueAction, type HearthRecipe } from './recipe'
import {
  createColdJunction,
  createThermocouple,
  readThermocouple,
  stepColdJunction,
  stepThermocouple,
  type ColdJunction,
  type Thermocouple,
} from './thermocouple'
import { createToaster, HEARTH_DOSE_MODEL, type HearthPhase, type ToasterAct } from './toaster'

/*
 * The hearth engine: one barrel over one simulated fire, with a virtual toaster. Pure: the same options and the same
 * calls give the same output; it knows no clock, network or disk.
 *
 *   const hearth = createHearth({ seed: 7, recipe, skill: 0.8, moisturePercent: 18 })
 *   while (hearth.phase() !== 'finished') {
 *     const { readings, marks } = hearth.advance(1)     // one second on, one reading per probe
 *   }
 *
 * `timeS` in readings and marks counts from the engine's start, which is the start of `startPhase`. A whole firing
 * with past instants: `at = startedAt + timeS`. Live: `advance(0.2)` five times a second.
 *
 * A firing goes preheating, bending, toasting, resting, finished. The toaster ends stages and phases by himself; a
 * phase mark comes at the start of each phase after the first, a stage mark at the start of each stage after the
 * first of the toast. With `isConsoleLed` he only keeps the fire, and `enterPhase`, `enterStage` and `act` bring
 * what a person did on the console.
 *
 * `continueFrom` brings a new engine to where a running firing stands (see there).
 */

export type HearthProbe = 'lead' | 'opposite' | 'coals'

/** What a gateway would report of one probe at `timeS`; `flag` only when a fault sets it. */
export type HearthReading = { probe: HearthProbe; timeS: number; emf: Emf; flag?: ReadingFlag }

/** What a toaster touches on the console. `stageIndex` is the stage that begins. */
export type HearthMark =
  | { timeS: number; kind: 'phase'; phase: HearthPhase }
  | { timeS: number; kind: 'stage'; stageIndex: number }
  | { timeS: number; kind: CueAction }

export type HearthOptions = {
  seed: number
  recipe: HearthRecipe
  /** 0 to 1; 0.8 is a good working toaster (default). */
  skill?: number
  /** Stave moisture at the start, % of dry mass; default 18. Above about 24 is a damp lot. */
  moisturePercent?: number
  /** Oven-dry specific gravity; drawn about 0.66 when left out. */
  specificGravity?: number
  roomTempC?: number
  startPhase?: 'preheating' | 'bending' | 'toasting'
  thermocoupleTypes?: Partial<Record<HearthProbe, ThermocoupleType>>
  /** The lead probe's own error, °C; grows by `driftCPerHour`. Default 0. */
  leadOffsetC?: number
  driftCPerHour?: number
  /** How good the fuel is: below 1 the fire is slow whatever one does. Default 1. */
  fuelQuality?: number
  isConsoleLed?: boolean
}

export type HearthStep = { readings: HearthReading[]; marks: HearthMark[] }

/** Where a running firing stands, as the server tells it. `points` are its lead readings, oldest first. */
export type HearthContinuation = {
  phase: 'preheating' | 'bending' | 'toasting' | 'resting'
  /** Since that phase began. */
  phaseTimeS: number
  stageIndex: number
  stageTimeS: number
  isLidOn: boolean
  /** `timeS` counts from anything; only differences matter. Values in °C. */
  points: readonly { timeS: number; tempC: number }[]
  /** Dose since toast start, minutes, or null to take it from the points. */
  doseMin: number | null
  oppositeTempC: number | null
}

export type Hearth = {
  /** Goes on by `dtS` (above 0) and reads every probe once, at the end of it. */
  advance: (dtS: number) => HearthStep
  timeS: () => number
  phase: () => HearthPhase
  stageIndex: () => number
  /** True temperatures, °C: what perfect probes would show. */
  woodTempC: () => { lead: number; opposite: number; coals: number; face: number }
  /** Dose at the lead probe since toast start, minutes at 200 °C, and the plan's. */
  doseMin: () => number
  planDoseMin: number
  enterPhase: (phase: HearthPhase) => void
  enterStage: (stageIndex: number) => void
  act: (action: CueAction) => void
  continueFrom: (continuation: HearthContinuation) => void
}

type Fire = {
  coals: Coals
  fuel: number
  unevenness: number
  liftedS: number
  /** Free water still inside the staves, kg/m² of face. */
  freeWaterKgPerM2: number
}

/** Everything that changes in one hearth. */
type HearthState = {
  options: Required<Omit<HearthOptions, 'thermocoupleTypes' | 'startPhase'>>
  timeS: number
  phase: HearthPhase
  phaseStartS: number
  stageIndex: number
  stageStartS: number
  fire: Fire
  lead: StaveState
  opposite: StaveState
  probes: Record<HearthProbe, Thermocouple>
  coldJunction: ColdJunction
  dose: DoseAccumulator
  toastStartS: number
  /** Dose before a continuation, minutes. */
  doseBeforeMin: number
  /** What the lead probe showed, one value a second, the last 60. */
  shownTempC: number[]
  shownAtS: number
  random: { fire: Random; wood: Random; probe: Random }
}

const LONGEST_STEP_S = 1
/** Between which heats of the fire a steady one is sought. */
const STEADY_HEAT_KW = { low: 0.5, high: 25 }
const PROBES: readonly HearthProbe[] = ['lead', 'opposite', 'coals']
const COLD_FACE_H_W_PER_M2K = 11
const WATER_H_W_PER_M2K = 120
/** What the water leaves on the face after preheat, kg/m². */
const PREHEAT_FILM_KG_PER_M2 = 0.4
/**
 * Water above this is taken as free: it does not dry where it is but rises to the face and boils off there, which
 * holds the wood near 100 °C (the constant-rate period of drying; the figures are judgement).
 */
const FREE_WATER_ABOVE_PERCENT = 18
const FREE_WATER_DEPTH_M = 0.025
const SEEPING_S = 1_000
const TURNING_OVER_S = 25
const CLIMB_WINDOW_S = 40
const CLIMB_MEAN_S = 8
const WOOD_LAG_S = 4
const COALS_PROBE_LAG_S = 9
/** Share of the coals' own glow that the probe over them sees; the rest is gas. */
const COALS_PROBE_GLOW = 0.7
const FEED_KG = 0.4

/** A new hearth: see the head of this file. Throws RangeError for options that the stave model refuses. */
export function createHearth(options: HearthOptions): Hearth {
  const state = createState(options)
  const toaster = createToaster({
    recipe: options.recipe,
    skill: state.options.skill,
    random: createRandom(options.seed).fork('toaster'),
  })
  return {
    advance: (dtS) => {
      const marks: HearthMark[] = []
      const parts = Math.max(1, Math.ceil(dtS / LONGEST_STEP_S - 1e-9))
      for (let part = 0; part < parts; part += 1) {
        stepHearth(state, dtS / parts)
        marks.push(...followToaster(state, toaster.tend(viewOf(state))))
      }
      return { readings: PROBES.map((probe) => readProbe(state, probe)), marks }
    },
    timeS: () => state.timeS,
    phase: () => state.phase,
    stageIndex: () => state.stageIndex,
    woodTempC: () => ({
      lead: leadTempC(state.lead),
      opposite: leadTempC(state.opposite),
      coals: state.fire.coals.coalsTempC,
      face: state.lead.tempC[0] ?? NaN,
    }),
    doseMin: () => state.doseBeforeMin + state.dose.minutes,
    planDoseMin: toaster.planDoseMin,
    enterPhase: (phase) => {
      if (phase !== state.phase) enterPhase(state, phase)
    },
    enterStage: (stageIndex) => enterStage(state, stageIndex),
    act: (kind) => actOnFire(state, { kind }),
    continueFrom: (continuation) => continueHearth(state, continuation),
  }
}

function createState(options: HearthOptions): HearthState {
  const random = createRandom(options.seed)
  const wood = random.fork('wood')
  const probe = random.fork('probe')
  const fireRandom = random.fork('fire')
  const roomTempC = options.roomTempC ?? 18
  const specificGravity = options.specificGravity ?? clamp(0.66 + 0.02 * wood.gaussian(), 0.58, 0.74)
  const isWarm = options.startPhase === 'toasting'
  const startTempC = isWarm ? options.recipe.planStartTempC : roomTempC
  const full = {
    seed: options.seed,
    recipe: options.recipe,
    skill: options.skill ?? 0.8,
    moisturePercent: options.moisturePercent ?? 18,
    specificGravity,
    roomTempC,
    leadOffsetC: options.leadOffsetC ?? 0,
    driftCPerHour: options.driftCPerHour ?? 0,
    fuelQuality: options.fuelQuality ?? 1,
    isConsoleLed: options.isConsoleLed ?? false,
  }
  const typeOf = (name: HearthProbe): ThermocoupleType => options.thermocoupleTypes?.[name] ?? 'K'
  const state: HearthState = {
    options: full,
    timeS: 0,
    phase: 'preheating',
    phaseStartS: 0,
    stageIndex: 0,
    stageStartS: 0,
    fire: {
      coals: createCoals(0.7, roomTempC),
      fuel: full.fuelQuality,
      unevenness: 0.03 * fireRandom.gaussian(),
      liftedS: 0,
      freeWaterKgPerM2: freeWaterKgPerM2(full.moisturePercent, specificGravity),
    },
    lead: createSimulatedStave(full, startTempC),
    opposite: createSimulatedStave(full, startTempC),
    probes: {
      lead: createThermocouple(typeOf('lead'), startTempC, WOOD_LAG_S),
      opposite: createThermocouple(typeOf('opposite'), startTempC, WOOD_LAG_S),
      coals: createThermocouple(typeOf('coals'), roomTempC, COALS_PROBE_LAG_S),
    },
    coldJunction: createColdJunction(roomTempC, probe),
    dose: createDoseAccumulator(HEARTH_DOSE_MODEL),
    toastStartS: 0,
    doseBeforeMin: 0,
    shownTempC: [],
    shownAtS: -Infinity,
    random: { fire: fireRandom, wood, probe },
  }
  if (options.startPhase !== undefined && options.startPhase !== 'preheating') {
    enterPhase(state, options.startPhase)
  }
  return state
}

function createSimulatedStave(
  options: { recipe: HearthRecipe; moisturePercent: number; specificGravity: number; roomTempC: number },
  startTempC: number,
): StaveState {
  return createStave({
    thicknessMm: options.recipe.thicknessMm ?? 27,
    probeDepthMm: options.recipe.probeDepthMm ?? 2,
    moisturePercent: Math.min(options.moisturePercent, FREE_WATER_ABOVE_PERCENT),
    startTempC,
    specificGravity: options.specificGravity,
    roomTempC: options.roomTempC,
    coldFaceHWPerM2K: COLD_FACE_H_W_PER_M2K,
    dose: HEARTH_DOSE_MODEL,
    toastDepthDoseMin: 0.1,
    probeDepthErrorMm: 0,
    diffusivityErrorShare: 0,
    cellMm: 1,
  })
}

function freeWaterKgPerM2(moisturePercent: number, specificGravity: number): number {
  const free = Math.max(0, moisturePercent - FREE_WATER_ABOVE_PERCENT) / 100
  return free * 1_000 * specificGravity * FREE_WATER_DEPTH_M
}

function leadTempC(stave: StaveState): number {
  return stave.tempC[stave.probeNode] ?? NaN
}

function stepHearth(state: HearthState, dtS: number) {
  const { fire, options, random } = state
  state.timeS += dtS
  fire.fuel = wander(fire.fuel, options.fuelQuality, 0.05, 150, dtS, random.fire)
  fire.unevenness = wander(fire.unevenness, 0, 0.035, 900, dtS, random.fire)
  fire.liftedS = Math.max(0, fire.liftedS - dtS)
  fire.coals.isUnderBarrel = isOverFire(state)
  seepWater(fire, dtS)
  stepCoals(fire.coals, dtS, fire.fuel, options.roomTempC)
  stepFace(state, state.lead, 1 + fire.unevenness, dtS)
  stepFace(state, state.opposite, 1 - fire.unevenness, dtS)
  dryFace(fire.coals, state.lead.tempC[0] ?? 0, dtS)
  stepProbes(state, dtS)
  noteShownTemp(state)
  if (state.phase === 'toasting') state.dose.add(state.timeS, leadTempC(state.lead))
}

/** Free water rises to the face once the wood is hot; in the water of the preheat it stays. */
function seepWater(fire: Fire, dtS: number) {
  if (!fire.coals.isUnderBarrel) return
  const seeping = fire.freeWaterKgPerM2 * (1 - Math.exp(-dtS / SEEPING_S))
  fire.freeWaterKgPerM2 -= seeping
  fire.coals.filmKgPerM2 += seeping
}

/** In the bend a rose that is warm enough is set off the fire until it has cooled a little. */
function isOverFire(state: HearthState): boolean {
  if (state.phase === 'toasting') return state.fire.liftedS === 0
  return state.phase === 'bending' && leadTempC(state.lead) < state.options.recipe.planStartTempC + 1
}

function stepFace(state: HearthState, stave: StaveState, exposure: number, dtS: number) {
  const { recipe, roomTempC } = state.options
  if (state.phase === 'preheating') {
    const gasTempC = recipe.preheat.waterTempC
    stepStave(stave, { gasTempC, hWPerM2K: WATER_H_W_PER_M2K, radiantTempC: gasTempC, emissivity: 0 }, dtS)
    return
  }
  stepStave(stave, fireAtFace(state.fire.coals, stave.tempC[0] ?? roomTempC, exposure, roomTempC), dtS)
}

function stepProbes(state: HearthState, dtS: number) {
  const { coals } = state.fire
  const overCoalsC = COALS_PROBE_GLOW * coals.coalsTempC + (1 - COALS_PROBE_GLOW) * coals.gasTempC
  stepThermocouple(state.probes.lead, leadTempC(state.lead), dtS)
  stepThermocouple(state.probes.opposite, leadTempC(state.opposite), dtS)
  stepThermocouple(state.probes.coals, overCoalsC, dtS)
  stepColdJunction(state.coldJunction, dtS, state.random.probe)
}

function leadErrorC(state: HearthState): number {
  return state.options.leadOffsetC + (state.options.driftCPerHour * state.timeS) / 3_600
}

function noteShownTemp(state: HearthState) {
  if (state.timeS - state.shownAtS < 1 - 1e-6) return
  state.shownAtS = state.timeS
  state.shownTempC.push(state.probes.lead.junctionTempC + leadErrorC(state))
  if (state.shownTempC.length > 60) state.shownTempC.shift()
}

/** Mean climb over the last 40 s, °C/min. */
function shownClimbCPerMin(shown: readonly number[]): number {
  if (shown.length < CLIMB_WINDOW_S + CLIMB_MEAN_S) return 0
  const late = shown.slice(-CLIMB_MEAN_S)
  const early = shown.slice(-CLIMB_WINDOW_S - CLIMB_MEAN_S, -CLIMB_WINDOW_S)
  const meanOf = (values: readonly number[]) => values.reduce((sum, value) => sum + value, 0) / values.length
  return ((meanOf(late) - meanOf(early)) * 60) / CLIMB_WINDOW_S
}

function viewOf(state: HearthState) {
  return {
    timeS: state.timeS,
    phase: state.phase,
    phaseTimeS: state.timeS - state.phaseStartS,
    stageIndex: state.stageIndex,
    stageTimeS: state.timeS - state.stageStartS,
    leadTempC: state.probes.lead.junctionTempC + leadErrorC(state),
    oppositeTempC: state.probes.opposite.junctionTempC,
    climbCPerMin: shownClimbCPerMin(state.shownTempC),
    doseMin: state.doseBeforeMin + state.dose.minutes,
    coals: state.fire.coals,
  }
}

function readProbe(state: HearthState, probe: HearthProbe): HearthReading {
  const offsetC = probe === 'lead' ? leadErrorC(state) : 0
  const emf = readThermocouple(state.probes[probe], state.coldJunction, state.random.probe, offsetC)
  return { probe, timeS: state.timeS, emf }
}

function followToaster(
  state: HearthState,
  turn: { acts: readonly ToasterAct[]; isStageOver: boolean; isPhaseOver: boolean },
): HearthMark[] {
  const marks: HearthMark[] = []
  const { timeS } = state
  for (const act of turn.acts) {
    // On a console, lid, mist and turns are the person's; the fire is still kept.
    if (state.options.isConsoleLed && !FIRE_KEEPING.has(act.kind)) continue
    actOnFire(state, act)
    if (act.kind !== 'draught' && !state.options.isConsoleLed) marks.push({ timeS, kind: act.kind })
  }
  if (state.options.isConsoleLed) return marks
  const isLastStage = state.stageIndex >= state.options.recipe.stages.length - 1
  if (turn.isStageOver && !isLastStage) {
    enterStage(state, state.stageIndex + 1)
    marks.push({ timeS, kind: 'stage', stageIndex: state.stageIndex })
  } else if (turn.isPhaseOver || turn.isStageOver) {
    enterPhase(state, NEXT_PHASE[state.phase])
    marks.push({ timeS, kind: 'phase', phase: state.phase })
  }
  return marks
}

const FIRE_KEEPING: ReadonlySet<ToasterAct['kind']> = new Set(['draught', 'feed', 'stir'])

const NEXT_PHASE: Record<HearthPhase, HearthPhase> = {
  preheating: 'bending',
  bending: 'toasting',
  toasting: 'resting',
  resting: 'finished',
  finished: 'finished',
}

function enterPhase(state: HearthState, phase: HearthPhase) {
  const { coals } = state.fire
  const isSoaked = state.phase === 'preheating' && state.options.recipe.preheat.minutes > 0
  if (isSoaked) coals.filmKgPerM2 = PREHEAT_FILM_KG_PER_M2
  if (phase === 'toasting') {
    state.stageStartS = state.timeS
    state.stageIndex = 0
    state.toastStartS = state.timeS
    state.dose = createDoseAccumulator(HEARTH_DOSE_MODEL)
    state.dose.add(state.timeS, leadTempC(state.lead))
    state.doseBeforeMin = 0
  }
  if (phase === 'resting') coals.draught = 0.05
  state.phase = phase
  state.phaseStartS = state.timeS
}

function enterStage(state: HearthState, stageIndex: number) {
  if (stageIndex === state.stageIndex) return
  state.stageIndex = stageIndex
  state.stageStartS = state.timeS
}

function actOnFire(state: HearthState, act: ToasterAct) {
  const { fire } = state
  if (act.kind === 'draught') fire.coals.draught = act.draught
  else if (act.kind === 'feed') feedCoals(fire.coals, act.kg ?? FEED_KG)
  else if (act.kind === 'stir') stirCoals(fire.coals)
  else if (act.kind === 'mist') mistFace(fire.coals)
  else if (act.kind === 'lid on') fire.coals.isLidOn = true
  else if (act.kind === 'lid off') fire.coals.isLidOn = false
  else if (act.kind === 'turn') fire.unevenness *= -0.5
  else fire.liftedS = TURNING_OVER_S
}

/**
 * Brings a new engine to where a running firing stands, so that its next reading joins the last stored one. Both
 * staves are taken through the stored temperatures (imposed at the probe's depth), which also gives the heat that
 * the face takes now; the fire is then set to give just that. Without points the plan's temperature stands in.
 */
function continueHearth(state: HearthState, continuation: HearthContinuation) {
  const { options, fire } = state
  const points = continuation.points.length > 0 ? continuation.points : [standInPoint(state, continuation)]
  const last = points.at(-1) ?? standInPoint(state, continuation)
  const oppositeShiftC = (continuation.oppositeTempC ?? last.tempC) - last.tempC
  state.lead = replayStave(options, points, 0)
  state.opposite = replayStave(options, points, oppositeShiftC)
  state.probes.lead.junctionTempC = last.tempC
  state.probes.opposite.junctionTempC = last.tempC + oppositeShiftC
  state.phase = continuation.phase
  state.phaseStartS = state.timeS - continuation.phaseTimeS
  state.stageIndex = continuation.stageIndex
  state.stageStartS = state.timeS - continuation.stageTimeS
  state.toastStartS = continuation.phase === 'toasting' ? state.phaseStartS : state.timeS
  state.dose = createDoseAccumulator(HEARTH_DOSE_MODEL)
  state.dose.add(state.timeS, last.tempC)
  state.doseBeforeMin = continuation.doseMin ?? doseOfPoints(points, last.timeS - continuation.phaseTimeS)
  state.shownTempC = shownBefore(points, last.timeS)
  state.shownAtS = state.timeS
  fire.freeWaterKgPerM2 *= Math.exp(-continuation.phaseTimeS / SEEPING_S)
  fire.coals.isLidOn = continuation.isLidOn
  fire.coals.isUnderBarrel = isOverFire(state)
  if (fire.coals.isUnderBarrel) setFireToFlux(fire, state.lead, options.roomTempC)
}

function standInPoint(
  state: HearthState,
  continuation: HearthContinuation,
): { timeS: number; tempC: number } {
  const { recipe, roomTempC } = state.options
  if (continuation.phase === 'preheating') return { timeS: 0, tempC: roomTempC }
  if (continuation.phase === 'bending') return { timeS: 0, tempC: recipe.planStartTempC }
  const plannedS = stageStartS(recipe, continuation.stageIndex) + continuation.stageTimeS
  return { timeS: 0, tempC: planTempC(recipe, continuation.phase === 'toasting' ? plannedS : Infinity) }
}

function replayStave(
  options: HearthState['options'],
  points: readonly { timeS: number; tempC: number }[],
  endShiftC: number,
): StaveState {
  const first = points[0]
  const last = points.at(-1)
  const stave = createSimulatedStave(options, first?.tempC ?? options.roomTempC)
  const spanS = Math.max(1, (last?.timeS ?? 0) - (first?.timeS ?? 0))
  let before = first
  for (const point of points) {
    const dtS = point.timeS - (before?.timeS ?? point.timeS)
    before = point
    if (dtS <= 0) continue
    const share = (point.timeS - (first?.timeS ?? 0)) / spanS
    stepStave(stave, point.tempC + share * endShiftC, dtS)
  }
  return stave
}

/** Dose of the points from `fromS` on, minutes. */
function doseOfPoints(points: readonly { timeS: number; tempC: number }[], fromS: number): number {
  const dose = createDoseAccumulator(HEARTH_DOSE_MODEL)
  for (const point of points) if (point.timeS >= fromS) dose.add(point.timeS, point.tempC)
  return dose.minutes
}

/** The last minute, a value a second, straight between points. */
function shownBefore(points: readonly { timeS: number; tempC: number }[], endS: number): number[] {
  const times = points.map((point) => point.timeS)
  const temps = points.map((point) => point.tempC)
  const shown: number[] = []
  for (let timeS = endS - 59; timeS <= endS; timeS += 1) {
    const tempC = valueAt(times, temps, timeS)
    if (!Number.isNaN(tempC)) shown.push(tempC)
  }
  return shown
}

/** Puts the fire at the steady coals whose net flux is what the face takes now, or at the nearest end of what burns. */
function setFireToFlux(fire: Fire, stave: StaveState, roomTempC: number) {
  const faceTempC = stave.tempC[0] ?? roomTempC
  const excessAt = (heatKw: number) => {
    settleCoals(fire.coals, heatKw, roomTempC)
    const flux = fireFluxWPerM2(fireAtFace(fire.coals, faceTempC, 1, roomTempC), faceTempC)
    return flux - stave.probeFluxWPerM2
  }
  const { low, high } = STEADY_HEAT_KW
  const heatKw = excessAt(low) >= 0 ? low : excessAt(high) <= 0 ? high : findRoot(excessAt, low, high, 1e-6)
  settleCoals(fire.coals, heatKw, roomTempC)
}

/** Ornstein–Uhlenbeck: wanders about `mean` with standard deviation `sd` and memory `memoryS`. */
function wander(
  value: number,
  mean: number,
  sd: number,
  memoryS: number,
  dtS: number,
  random: Random,
): number {
  const keep = Math.exp(-dtS / memoryS)
  return mean + (value - mean) * keep + sd * Math.sqrt(1 - keep * keep) * random.gaussian()
}

function clamp(value: number, low: number, high: number): number {
  return Math.min(high, Math.max(low, value))
}
