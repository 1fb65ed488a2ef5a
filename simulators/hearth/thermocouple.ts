import { emfMv, type ThermocoupleType } from '@/lib/science/thermocouple'
import type { Emf } from '@/lib/gateway/protocol'
import type { Random } from './random'

/** One probe with its lead and the gateway's input: what the gateway would report. */
export type Thermocouple = {
  type: ThermocoupleType
  /** Temperature of the measuring junction, °C; follows what it sits in with a first-order lag. */
  junctionTempC: number
  lagS: number
  noiseMicrovolts: number
}

/** The gateway's terminals: the true temperature wanders, the gateway's own sensor is a little off. */
export type ColdJunction = { trueTempC: number; sensorOffsetC: number; restTempC: number }

const INPUT_STEP_MICROVOLTS = 1
const COLD_JUNCTION_STEP_C = 1 / 16
const COLD_JUNCTION_DRIFT_S = 1_800
const RANGES_C = { K: [-200, 1_370], N: [-200, 1_290], J: [-200, 1_190], T: [-200, 399] } as const

export function createThermocouple(type: ThermocoupleType, startTempC: number, lagS: number): Thermocouple {
  return { type, junctionTempC: startTempC, lagS, noiseMicrovolts: 5 }
}

export function createColdJunction(roomTempC: number, random: Random): ColdJunction {
  const restTempC = roomTempC + random.between(4, 9)
  return { trueTempC: restTempC, restTempC, sensorOffsetC: random.gaussian() * 0.15 }
}

/** The box warms and cools by a degree or so within half an hour (Ornstein–Uhlenbeck, sd 0.8 °C). */
export function stepColdJunction(coldJunction: ColdJunction, dtS: number, random: Random) {
  const keep = Math.exp(-dtS / COLD_JUNCTION_DRIFT_S)
  const { trueTempC, restTempC } = coldJunction
  coldJunction.trueTempC =
    restTempC + (trueTempC - restTempC) * keep + 0.8 * Math.sqrt(1 - keep * keep) * random.gaussian()
}

export function stepThermocouple(thermocouple: Thermocouple, surroundingsTempC: number, dtS: number) {
  const keep = Math.exp(-dtS / thermocouple.lagS)
  thermocouple.junctionTempC = surroundingsTempC + (thermocouple.junctionTempC - surroundingsTempC) * keep
}

/**
 * Voltage at the terminals: E(junction) − E(terminals), with the input's noise and step, and the terminals'
 * temperature as the gateway's sensor gives it. `offsetC` is an error of the probe itself (drift).
 */
export function readThermocouple(
  thermocouple: Thermocouple,
  coldJunction: ColdJunction,
  random: Random,
  offsetC = 0,
): Emf {
  const [lowC, highC] = RANGES_C[thermocouple.type]
  const junctionTempC = Math.min(highC, Math.max(lowC, thermocouple.junctionTempC + offsetC))
  const millivolts =
    emfMv(thermocouple.type, junctionTempC) - emfMv(thermocouple.type, coldJunction.trueTempC)
  const noisy = millivolts * 1_000 + thermocouple.noiseMicrovolts * random.gaussian()
  return {
    microvolts: Math.round(noisy / INPUT_STEP_MICROVOLTS) * INPUT_STEP_MICROVOLTS,
    coldJunctionC: roundTo(coldJunction.trueTempC + coldJunction.sensorOffsetC, COLD_JUNCTION_STEP_C),
  }
}

/** To the sensor's step, and to the 0.01 °C that the protocol keeps. */
function roundTo(value: number, step: number): number {
  return Math.round(Math.round(value / step) * step * 100) / 100
}
