import type { ProbeAssignment } from '@/lib/ingest/firing-probes'
import type { FiringSeries } from '@/lib/ingest/firing-readings'
import type { FiringFacts } from '@/lib/live/firing-facts'
import { planOf } from '@/lib/recipes/plan-of'
import type { RecipeContent } from '@/lib/recipes/schema'
import { defaultSiteRules } from '@/lib/science/site-rules'
import { compensatedTempC } from '@/lib/science/thermocouple'
import { createHearth } from '@/simulators/hearth/hearth'
import type { HearthOptions, HearthProbe } from '@/simulators/hearth/hearth'
import { hearthRecipeOf } from '@/simulators/hearth/recipe-of-content'

/** A firing played by the hearth engine at speed, one reading a second, as the hub would know it afterwards. */
export type PlayedFire = { facts: FiringFacts; series: FiringSeries[] }

const roles: readonly HearthProbe[] = ['lead', 'opposite', 'coals']

export function playFire(
  content: RecipeContent,
  startMs: number,
  engine: Omit<HearthOptions, 'recipe'>,
): PlayedFire {
  const hearth = createHearth({ ...engine, recipe: hearthRecipeOf(content) })
  const columns = Object.fromEntries(
    roles.map((role) => [role, { atMs: new Array<number>(), tempC: new Array<number>() }]),
  )
  const at: Record<string, number> = {}
  const marks: FiringFacts['marks'] = []
  while (hearth.phase() !== 'finished') {
    const step = hearth.advance(1)
    for (const mark of step.marks) {
      const atMs = startMs + mark.timeS * 1000
      if (mark.kind === 'phase') at[mark.phase] = atMs
      else if (mark.kind === 'stage') marks.push({ kind: 'stage', atMs, stagePosition: mark.stageIndex })
      else marks.push({ kind: mark.kind, atMs, stagePosition: null })
    }
    for (const { probe, timeS, emf } of step.readings) {
      columns[probe]?.atMs.push(Math.round(startMs + timeS * 1000))
      columns[probe]?.tempC.push(compensatedTempC('K', emf.microvolts / 1000, emf.coldJunctionC))
    }
  }
  const endedMs = startMs + hearth.timeS() * 1000
  const series = roles.map((role): FiringSeries => ({
    role,
    assignments: [assignmentOf(role, startMs)],
    atMs: Float64Array.from(columns[role]?.atMs ?? []),
    tempC: Float64Array.from(columns[role]?.tempC ?? []),
    spacingS: 1,
  }))
  const facts: FiringFacts = {
    firingId: '00000000-0000-4000-8000-000000000000',
    revision: 1,
    state: 'finished',
    hearthNumber: 1,
    serial: 'TST-0001-A',
    preheatMs: startMs,
    bendMs: at['bending'] ?? null,
    toastMs: at['toasting'] ?? null,
    restMs: at['resting'] ?? null,
    endedMs,
    moisturePercent: engine.moisturePercent ?? 18,
    recipeName: 'Played',
    content,
    plan: planOf(content, defaultSiteRules.dose),
    rules: defaultSiteRules,
    assignments: series.flatMap((one) => one.assignments),
    marks,
  }
  return { facts, series }
}

function assignmentOf(role: HearthProbe, fromMs: number): ProbeAssignment {
  return {
    probeId: role,
    probeNo: roles.indexOf(role),
    probeName: role === 'lead' ? 'Bilge A' : role === 'opposite' ? 'Bilge B' : 'Coals',
    gatewayId: 'gateway',
    role,
    iecClass: 1,
    place: { height: 'bilge', side: 'A', depthMm: 2, mounting: 'wedge' },
    fromMs,
    untilMs: Infinity,
    conversion: { type: 'K', correction: { correctionC: () => 0, uncertaintyC: () => null, check: null } },
  }
}
