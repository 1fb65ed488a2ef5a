import type { ProbeAssignment } from '@/lib/ingest/firing-probes'
import type { LiveFiring } from '@/lib/live/live-firing'
import { createLiveFiring } from '@/lib/live/live-firing'
import { readFiringFacts } from '@/lib/live/firing-facts'
import { convertReading } from '@/lib/ingest/convert-reading'
import { forkEm } from '@/lib/db/orm'
import { emfMv } from '@/lib/science/thermocouple'
import { makeFire, woodTempC } from '@/tests/support/fire'
import type { TestPeople } from '@/tests/support/people'
import type { Figure } from '@/tests/bench/figure'

const hearths = 6
const hz = 5
const probes = 3
const warmS = 1_500
const measuredS = 120

/** Share of one core that the live step takes for six hearths at 5 Hz and three probes each, 25 min into a toast. */
export async function benchLiveStep(people: TestPeople): Promise<Figure[]> {
  const toastMs = Date.now()
  const firings: { live: LiveFiring; lead: ProbeAssignment | undefined }[] = []
  for (let i = 0; i < hearths; i += 1) {
    const fire = await makeFire(people, toastMs)
    const facts = await readFiringFacts(await forkEm(), fire.firing.id)
    if (facts === null) throw new Error('the firing of the bench is not there')
    firings.push({ live: createLiveFiring(facts), lead: facts.assignments[0] })
  }
  const roles = ['lead', 'opposite', 'coals'] as const
  const step = (tick: number, isShown: boolean) => {
    const atMs = toastMs + (tick * 1000) / hz
    for (const { live, lead } of firings) {
      if (lead === undefined) continue
      for (let probe = 0; probe < probes; probe += 1) {
        const emf = Math.round(10_000 * (emfMv('K', woodTempC(tick / hz)) - emfMv('K', 24.5)))
        const role = roles[probe] ?? 'lead'
        live.put({ ...lead, role }, atMs, convertReading(lead.conversion, emf, 2_450, null, 0), 0)
      }
      if (!isShown) continue
      live.glance(atMs)
      if (tick % hz === 0) live.state(atMs)
    }
  }
  for (let tick = 0; tick < warmS * hz; tick += 1) step(tick, false)
  step(warmS * hz, true)
  const cpu = process.cpuUsage()
  for (let tick = warmS * hz + 1; tick <= (warmS + measuredS) * hz; tick += 1) step(tick, true)
  const used = process.cpuUsage(cpu)
  const share = (used.user + used.system) / 1e6 / measuredS
  return [{ what: 'live step, six hearths, of one core', value: 100 * share, unit: '%', target: '≤ 1' }]
}
