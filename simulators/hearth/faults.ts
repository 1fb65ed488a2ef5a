import * as z from 'zod'
import type { HearthProbe, HearthReading } from './hearth'

/*
 * Faults on command. Those of a probe change its readings; those of the gateway change how they travel; those of a
 * module, which there is only with FEED=modbus, change how it answers the gateway program. A fault
 * lasts `forS` seconds and then is gone as if repaired.
 */

export const PROBE_FAULTS = ['open circuit', 'drift', 'stuck', 'cold-junction step'] as const
export const GATEWAY_FAULTS = [
  'cut network',
  'restart',
  'clock skew',
  'doubled batches',
  'reordered batches',
] as const

export const MODULE_FAULTS = ['module off', 'module hangs', 'module cuts', 'module garbage'] as const

export const probeFaultSchema = z.enum(PROBE_FAULTS)
export const gatewayFaultSchema = z.enum(GATEWAY_FAULTS)
export const moduleFaultSchema = z.enum(MODULE_FAULTS)
export type ProbeFaultKind = z.infer<typeof probeFaultSchema>
export type GatewayFaultKind = z.infer<typeof gatewayFaultSchema>
export type ModuleFaultKind = z.infer<typeof moduleFaultSchema>

/** Voltage at which the gateway's input rests when a thermocouple is open, µV: beyond any thermocouple. */
export const OPEN_INPUT_MICROVOLTS = 100_000
/** A drifting probe gains 3 °C a minute up to 20 °C; type K gives about 41 µV/°C at 0–400 °C (ITS-90 table). */
const DRIFT_MICROVOLTS_PER_S = (3 / 60) * 41
const MOST_DRIFT_MICROVOLTS = 20 * 41
const COLD_JUNCTION_STEP_C = 8
export const CLOCK_SKEW_MS = 90_000

export type ProbeFault = { kind: ProbeFaultKind; probe: HearthProbe; fromS: number; forS: number }

/**
 * A function that shows one probe's readings as they are with the fault; others, and those outside
 * [fromS, fromS + forS), pass unchanged. It remembers what a stuck probe shows: use one for one stream of readings.
 */
export function createProbeFault(fault: ProbeFault): (reading: HearthReading) => HearthReading {
  let stuckAt: HearthReading['emf'] | null = null
  return (reading) => {
    const sinceS = reading.timeS - fault.fromS
    const isCold = fault.kind === 'cold-junction step'
    if (sinceS < 0 || sinceS >= fault.forS || (!isCold && reading.probe !== fault.probe)) return reading
    stuckAt ??= reading.emf
    return { ...reading, ...spoil(fault.kind, reading, sinceS, stuckAt) }
  }
}

function spoil(
  kind: ProbeFaultKind,
  reading: HearthReading,
  sinceS: number,
  stuckAt: HearthReading['emf'],
): Partial<HearthReading> {
  const { emf } = reading
  switch (kind) {
    case 'open circuit':
      return { emf: { ...emf, microvolts: OPEN_INPUT_MICROVOLTS }, flag: 'open' }
    case 'drift': {
      const drift = Math.min(MOST_DRIFT_MICROVOLTS, Math.round(DRIFT_MICROVOLTS_PER_S * sinceS))
      return { emf: { ...emf, microvolts: emf.microvolts + drift } }
    }
    case 'stuck':
      return { emf: stuckAt }
    case 'cold-junction step':
      // The sensor at the terminals is wrong for every probe of the box; the voltages are right.
      return { emf: { ...emf, coldJunctionC: emf.coldJunctionC + COLD_JUNCTION_STEP_C } }
  }
}
