import { randomUUID } from 'node:crypto'
import { storeReadings } from '@/lib/ingest/store-readings'
import { now } from '@/lib/runtime'
import { emfMv } from '@/lib/science/thermocouple'
import type { TestPeople } from '@/tests/support/people'
import type { TestFiring, TestGateway, TestProbe } from '@/tests/support/room'
import { createTestFiring, createTestGateway, createTestProbe } from '@/tests/support/room'

export type FireReading = {
  seq: number
  probeId: string
  at: string
  emf: { microvolts: number; coldJunctionC: number }
  flag?: 'open'
}

/** A toasting firing with a lead and an opposite probe, and its gateway as a test speaks for it. */
export type Fire = {
  gateway: TestGateway
  lead: TestProbe
  opposite: TestProbe
  firing: TestFiring
  toastMs: number
  bootId: string
  /** Readings of both probes from `fromS` to `untilS` after toast start, five a second. */
  readings: (fromS: number, untilS: number) => FireReading[]
  message: (readings: readonly FireReading[]) => object
  send: (readings: readonly FireReading[]) => Promise<void>
}

/** 60 °C at toast start, 10 °C a minute, 190 °C at most: crosses the base of the dose at 6 min. */
export function woodTempC(toastS: number): number {
  return Math.min(190, 60 + toastS / 6) + Math.sin(toastS)
}

export async function makeFire(people: TestPeople, toastMs: number): Promise<Fire> {
  const gateway = await createTestGateway()
  const lead = await createTestProbe(gateway.gatewayId, 1)
  const opposite = await createTestProbe(gateway.gatewayId, 2)
  const firing = await createTestFiring({
    accountId: people.toaster.accountId,
    customerId: people.customers.first.id,
    state: 'toasting',
    preheatAt: new Date(toastMs - 120_000),
    toastAt: new Date(toastMs),
    probes: { lead: lead.id, opposite: opposite.id },
  })
  const bootId = randomUUID()
  const readings = (fromS: number, untilS: number): FireReading[] => {
    const all: FireReading[] = []
    for (let tick = Math.round(fromS * 5); tick < Math.round(untilS * 5); tick += 1) {
      for (const [offset, probe] of [lead, opposite].entries()) {
        const tempC = woodTempC(tick / 5) - 3 * offset
        all.push({
          // Numbers begin at 1 a hundred seconds before the toast.
          seq: 1 + 2 * (tick + 500) + offset,
          probeId: probe.id,
          at: new Date(toastMs + tick * 200).toISOString(),
          emf: { microvolts: 1000 * (emfMv('K', tempC) - emfMv('K', 24.5)), coldJunctionC: 24.5 },
        })
      }
    }
    return all
  }
  const message = (some: readonly FireReading[]) => ({
    bootId,
    sentAt: now().toISOString(),
    readings: some,
  })
  return {
    gateway,
    lead,
    opposite,
    firing,
    toastMs,
    bootId,
    readings,
    message,
    send: async (some) => {
      for (let from = 0; from < some.length; from += 4_000) {
        await storeReadings(gateway, message(some.slice(from, from + 4_000)))
      }
    },
  }
}
