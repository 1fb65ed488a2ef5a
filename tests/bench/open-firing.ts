import { randomUUID } from 'node:crypto'
import { performance } from 'node:perf_hooks'
import { getFiringPicture } from '@/lib/firings/get-firing-picture'
import { scoreFiring } from '@/lib/firings/score-firing'
import { sealFiring } from '@/lib/ingest/seal-firing'
import { storeReadings } from '@/lib/ingest/store-readings'
import { emfMv } from '@/lib/science/thermocouple'
import type { Figure } from '@/tests/bench/figure'
import { median, quantile } from '@/tests/bench/figure'
import type { TestPeople } from '@/tests/support/people'
import type { TestProbe } from '@/tests/support/room'
import { createTestFiring, createTestGateway, createTestProbe, endTestFiring } from '@/tests/support/room'

const preheatS = 22 * 60
const toastS = 45 * 60
const perSecond = 5
const probeCount = 4
const opens = 60
const system = { kind: 'system', name: 'bench' } as const

/** Opening a finished firing of 45 min toast after 22 min preheat and bend, four probes at 5 Hz: all that its page draws. */
export async function benchOpenFiring(people: TestPeople): Promise<Figure[]> {
  const id = await makeFiring(people)
  const waits: number[] = []
  const cpuMs: number[] = []
  for (let i = 0; i < opens + 5; i += 1) {
    const cpu = process.cpuUsage()
    const startedAt = performance.now()
    await getFiringPicture(people.masterCooper.actor, { id })
    const used = process.cpuUsage(cpu)
    if (i < 5) continue
    waits.push(performance.now() - startedAt)
    cpuMs.push((used.user + used.system) / 1000)
  }
  return [
    { what: 'open a finished firing, server p95', value: quantile(waits, 0.95), unit: 'ms', target: '≤ 150' },
    { what: 'open a finished firing, median', value: median(waits), unit: 'ms', target: '' },
    { what: 'open a finished firing, processor time', value: median(cpuMs), unit: 'ms', target: '' },
  ]
}

async function makeFiring(people: TestPeople): Promise<string> {
  const gateway = await createTestGateway({ mayReplay: true })
  const probes: TestProbe[] = []
  for (let channel = 1; channel <= probeCount; channel += 1) {
    probes.push(await createTestProbe(gateway.gatewayId, channel))
  }
  const startMs = Date.now() - 6 * 3_600_000
  const at = (s: number) => new Date(startMs + s * 1000)
  const firing = await createTestFiring({
    accountId: people.toaster.accountId,
    customerId: people.customers.first.id,
    state: 'toasting',
    preheatAt: at(0),
    toastAt: at(preheatS),
    probes: { lead: probes[0]?.id ?? '', opposite: probes[1]?.id ?? '', coals: probes[2]?.id ?? '' },
  })
  const bootId = randomUUID()
  let seq = 0
  const minutes = (preheatS + toastS) / 60
  for (let minute = 0; minute < minutes; minute += 1) {
    const readings = Array.from({ length: 60 * perSecond * probeCount }, (_, i) => {
      const s = minute * 60 + Math.floor(i / probeCount) / perSecond
      seq += 1
      return {
        seq,
        probeId: probes[i % probeCount]?.id ?? '',
        at: at(s).toISOString(),
        emf: { microvolts: Math.round(curveMv(s, i) * 10_000) / 10, coldJunctionC: 24 },
      }
    })
    await storeReadings(gateway, { bootId, sentAt: at(minute * 60 + 60).toISOString(), readings })
  }
  await endTestFiring(firing.id, at(preheatS + toastS))
  await sealFiring(firing.id)
  await scoreFiring(system, { id: firing.id })
  return firing.id
}

/** 60 °C to 185 °C in 20 min of toast and held there, with a little noise, as type K less its cold junction. */
function curveMv(s: number, i: number): number {
  const toastedS = Math.max(0, s - preheatS)
  const tempC = 60 + Math.min(125, (toastedS * 125) / 1200) + 0.2 * Math.sin(i * 12.9898 + s)
  return emfMv('K', tempC) - emfMv('K', 24)
}
