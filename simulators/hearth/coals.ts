/*
 * The fire in the cresset. A model for exercising the console, not a prediction: its figures are judgement, chosen
 * so that a well-kept fire brings the wood at 2 mm to 150–220 °C in 30–45 minutes.
 *
 * Fed wood catches with a lag and becomes glowing coals; these burn at a rate set by draught, ash and lid. The
 * burning gives the coals' temperature and that of the gas in the barrel, each with its own lag.
 */

import { LATENT_HEAT_J_PER_KG } from '@/lib/science/constants'
import type { FaceFire } from '@/lib/science/stave'

export type Coals = {
  /** Fed, not yet glowing, kg. */
  freshKg: number
  glowingKg: number
  /** 0 a clean fire, 1 smothered in ash. */
  ash: number
  /** 0 closed to 1 wide open: how the barrel stands over the fire. */
  draught: number
  isLidOn: boolean
  /** What a stir adds to the burning, as a share; fades. */
  brightening: number
  /** False while the barrel stands off the fire: preheat, rest, being turned over. */
  isUnderBarrel: boolean
  heatKw: number
  coalsTempC: number
  gasTempC: number
  /** Water on the face, kg/m². */
  filmKgPerM2: number
}

const CATCH_LAG_S = 110
const BURN_TIME_S = 2_600
const HEAT_OF_CHARCOAL_J_PER_KG = 30e6
const COALS_LAG_S = 40
const GAS_LAG_S = 60
const BRIGHTENING_FADE_S = 45
const ASH_TIME_S = 900
/** Radiation from coals to the wood at the lead probe's height: view factor times emissivities. */
const RADIATIVE_SHARE = 0.055
const CONVECTION_W_PER_M2K = 14
const EVAPORATION_W_PER_M2K = 80
const WET_FACE_C = 40
const SHORTEST_DRYING_S = 15
const MIST_KG_PER_M2 = 0.02

export const MOST_GLOWING_KG = 2.1

export function createCoals(glowingKg: number, roomTempC: number): Coals {
  return {
    freshKg: 0,
    glowingKg,
    ash: 0.1,
    draught: 0.3,
    isLidOn: false,
    brightening: 0,
    isUnderBarrel: false,
    heatKw: 0,
    coalsTempC: 420,
    gasTempC: roomTempC + 20,
    filmKgPerM2: 0,
  }
}

export function feedCoals(coals: Coals, kg: number) {
  // Fresh wood also covers the glow for a moment.
  coals.freshKg += kg
  coals.brightening -= 0.04
}

export function stirCoals(coals: Coals) {
  coals.brightening += 0.22
  coals.ash *= 0.35
}

export function mistFace(coals: Coals) {
  coals.filmKgPerM2 += MIST_KG_PER_M2
}

/** Burning per kg of glowing coals relative to a clean, half-open fire without a lid. */
export function burningShare(coals: Coals): number {
  const draught = 0.35 + 1.3 * coals.draught
  return draught * (1 - 0.45 * coals.ash) * (coals.isLidOn ? 0.94 : 1) * Math.max(0.2, 1 + coals.brightening)
}

/** Heat of `glowingKg` at a burning share, kW. */
export function heatKwOf(glowingKg: number, share: number): number {
  return (glowingKg / BURN_TIME_S) * share * (HEAT_OF_CHARCOAL_J_PER_KG / 1_000)
}

/** Advances the fire; `fuel` is the quality of what burns just now, about 1. */
export function stepCoals(coals: Coals, dtS: number, fuel: number, roomTempC: number) {
  const catching = coals.freshKg * (1 - Math.exp(-dtS / CATCH_LAG_S))
  const share = burningShare(coals)
  const burnt = coals.glowingKg * (1 - Math.exp((-dtS * share) / BURN_TIME_S))
  coals.heatKw = heatKwOf(coals.glowingKg, share) * fuel
  coals.freshKg -= catching
  // A part of fed wood goes as flame and smoke before there are coals.
  coals.glowingKg = Math.min(MOST_GLOWING_KG, coals.glowingKg + 0.7 * catching - burnt)
  coals.brightening *= Math.exp(-dtS / BRIGHTENING_FADE_S)
  coals.ash = 1 - (1 - coals.ash) * Math.exp((-dtS * share) / (ASH_TIME_S * 3))
  coals.coalsTempC = approach(coals.coalsTempC, glowTempC(coals.heatKw), dtS, COALS_LAG_S)
  coals.gasTempC = approach(coals.gasTempC, gasTempCOf(coals, roomTempC), dtS, GAS_LAG_S)
}

/** Puts the fire at once where it would settle at `heatKw`, half open, with the coals that it takes. */
export function settleCoals(coals: Coals, heatKw: number, roomTempC: number) {
  coals.draught = 0.5
  coals.brightening = 0
  coals.freshKg = 0
  coals.heatKw = heatKw
  coals.glowingKg = Math.min(MOST_GLOWING_KG, heatKw / heatKwOf(1, burningShare(coals)))
  coals.coalsTempC = glowTempC(heatKw)
  coals.gasTempC = gasTempCOf(coals, roomTempC)
}

/** Coals' temperature at a given heat, °C. */
export function glowTempC(heatKw: number): number {
  return 300 + 130 * Math.sqrt(Math.max(0, heatKw))
}

function gasTempCOf(coals: Coals, roomTempC: number): number {
  return roomTempC + coals.heatKw * (coals.isLidOn ? 12.5 : 9)
}

function approach(value: number, target: number, dtS: number, lagS: number): number {
  return target + (value - target) * Math.exp(-dtS / lagS)
}

/**
 * Fire at the face. `exposure` is this side's share of the radiation, about 1. Water on the face takes its heat as
 * if from the gas, so that the sum of fluxes is right.
 */
export function fireAtFace(coals: Coals, faceTempC: number, exposure: number, roomTempC: number): FaceFire {
  const evaporationWPerM2 = evaporationFlux(coals, faceTempC)
  const gasTempC = coals.isUnderBarrel ? coals.gasTempC : roomTempC
  const hWPerM2K = coals.isUnderBarrel ? CONVECTION_W_PER_M2K * (coals.isLidOn ? 1.15 : 1) : 7
  return {
    gasTempC: gasTempC - evaporationWPerM2 / hWPerM2K,
    hWPerM2K,
    radiantTempC: coals.isUnderBarrel ? coals.coalsTempC : roomTempC,
    emissivity: coals.isUnderBarrel ? RADIATIVE_SHARE * exposure : 0.5,
  }
}

/** Heat that the water on the face takes, W/m². */
export function evaporationFlux(coals: Coals, faceTempC: number): number {
  const wholeFilm = (coals.filmKgPerM2 * LATENT_HEAT_J_PER_KG) / SHORTEST_DRYING_S
  return Math.min(wholeFilm, EVAPORATION_W_PER_M2K * Math.max(0, faceTempC - WET_FACE_C))
}

/** Dries the face by what `evaporationFlux` took. */
export function dryFace(coals: Coals, faceTempC: number, dtS: number) {
  coals.filmKgPerM2 = Math.max(
    0,
    coals.filmKgPerM2 - (evaporationFlux(coals, faceTempC) * dtS) / LATENT_HEAT_J_PER_KG,
  )
}
