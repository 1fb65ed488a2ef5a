import * as z from 'zod'
import {
  createProbeFault,
  gatewayFaultSchema,
  moduleFaultSchema,
  probeFaultSchema,
  type GatewayFaultKind,
  type ModuleFaultKind,
} from './faults'
import type { HearthReading } from './hearth'

/** A fault on command: at a hearth (a gateway's fault touches every hearth of its gateway), for so many seconds. */
export const faultOrderSchema = z.strictObject({
  hearth: z.int().min(1).max(99),
  kind: z.union([probeFaultSchema, gatewayFaultSchema, moduleFaultSchema]),
  forS: z.number().positive().max(86_400),
  /** Of a probe's fault; the cold junction is the gateway's and touches all three. */
  probe: z.enum(['lead', 'opposite', 'coals']).default('lead'),
})
export type FaultOrder = z.infer<typeof faultOrderSchema>

export type FaultBoard = {
  begin: (order: FaultOrder) => void
  /** What is wrong now, with the seconds that are left. */
  list: () => (FaultOrder & { leftS: number })[]
  isActive: (kind: GatewayFaultKind | ModuleFaultKind, hearths: readonly number[]) => boolean
  /** Readings of a hearth as its faults show them; `timeS` must be the wall clock's seconds. */
  spoil: (hearth: number, readings: readonly HearthReading[]) => HearthReading[]
}

type ActiveFault = { order: FaultOrder; untilS: number; apply: (reading: HearthReading) => HearthReading }

export function createFaultBoard(nowMs: () => number): FaultBoard {
  let active: ActiveFault[] = []
  const nowS = () => nowMs() / 1_000
  const current = () => {
    active = active.filter((fault) => fault.untilS > nowS())
    return active
  }
  return {
    begin: (order) => {
      const fromS = nowS()
      const kind = probeFaultSchema.safeParse(order.kind)
      const apply = kind.success
        ? createProbeFault({ kind: kind.data, probe: order.probe, fromS, forS: order.forS })
        : (reading: HearthReading) => reading
      active = [...current(), { order, untilS: fromS + order.forS, apply }]
    },
    list: () => current().map(({ order, untilS }) => ({ ...order, leftS: Math.round(untilS - nowS()) })),
    isActive: (kind, hearths) =>
      current().some(({ order }) => order.kind === kind && hearths.includes(order.hearth)),
    spoil: (hearth, readings) => {
      const here = current().filter(({ order }) => order.hearth === hearth)
      return readings.map((reading) => here.reduce((spoilt, fault) => fault.apply(spoilt), reading))
    },
  }
}
