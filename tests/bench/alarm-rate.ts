import { countsAsAlarm } from '@/lib/alarms/alarm-kinds'
import { replayAlarms } from '@/lib/live/replay-alarms'
import { demoRecipes } from '@/simulators/scenarios/demo-recipes'
import type { Figure } from '@/tests/bench/figure'
import { playFire } from '@/tests/support/six-fires'

const fires = 6
/** A toaster sets the next barrel over its fire so long after the one before, s. */
const apartS = 420
const startMs = Date.UTC(2027, 1, 1, 7, 0)

export type AlarmRate = {
  alarms: number
  hours: number
  perTenMin: number
  byKind: Record<string, number>
}

/**
 * Alarms of six normal firings of one toaster, one started every seven minutes: good working hands, dry lots, no
 * fault, the demo's own recipes. Reminders are counted apart.
 */
export function sixNormalFirings(seed: number): AlarmRate {
  const contents = demoRecipes.flatMap((recipe) => recipe.versions.slice(-1).map(({ content }) => content))
  const byKind: Record<string, number> = {}
  let alarms = 0
  let endMs = startMs
  for (let i = 0; i < fires; i += 1) {
    const content = contents[(seed + i) % contents.length]
    if (content === undefined) throw new Error('the demo has no recipes')
    const fire = playFire(content, startMs + i * apartS * 1000, {
      seed: seed * 100 + i,
      skill: 0.8,
      moisturePercent: 18,
    })
    endMs = Math.max(endMs, fire.facts.endedMs ?? 0)
    for (const move of replayAlarms(fire.facts, fire.series, { stepMs: 1_000, seenAfterMs: 10_000 })) {
      if (move.to !== 'unacknowledged') continue
      byKind[move.kind] = (byKind[move.kind] ?? 0) + 1
      if (countsAsAlarm(move.kind)) alarms += 1
    }
  }
  const hours = (endMs - startMs) / 3_600_000
  return { alarms, hours, perTenMin: alarms / (6 * hours), byKind }
}

const seeds = [1, 2, 3]

/** The worst of three toasters with six fires each. */
export async function benchAlarmRate(): Promise<Figure[]> {
  const rates = seeds.map(sixNormalFirings)
  const worst = Math.max(...rates.map((rate) => rate.perTenMin))
  return [
    {
      what: 'alarms, six normal firings together, per toaster',
      value: worst,
      unit: 'per 10 min',
      target: '≤ 1',
    },
  ]
}
