import type { PersonActor } from '@/lib/auth/actor'
import { listFirings } from '@/lib/firings/list-firings'
import { listFiringsQuery } from '@/lib/firings/schema'
import { fitMarkerResponse } from '@/lib/markers/fit-marker'
import { listMarkers } from '@/lib/markers/list-markers'
import { saveMarkerFormula } from '@/lib/markers/save-marker-formula'
import type { Random } from '@/simulators/hearth/random'

/** A fit's barrels: enough for curves, few enough to be read. */
const barrelCount = 26

type DemoFit = {
  key: string
  family: 'rise and fall with dose' | 'line in log10 dose'
  /** What the invented oak holds at a dose, µg/g, and its spread. */
  contentOf: (doseMin: number) => number
  spread: number
  /** Limit of the invented laboratory, µg/g. */
  limit: number
}

/** Invented responses: their figures come from no oak. */
const demoFits: readonly DemoFit[] = [
  {
    key: 'vanillin',
    family: 'rise and fall with dose',
    contentOf: (doseMin) => 150 * (1 - Math.exp(-0.18 * doseMin)) * Math.exp(-0.02 * doseMin),
    spread: 6,
    limit: 5,
  },
  {
    key: 'guaiacol',
    family: 'line in log10 dose',
    contentOf: (doseMin) => 0.3 + 3.1 * Math.log10(doseMin),
    spread: 0.35,
    limit: 1,
  },
]

/** A formula and, where the past has barrels enough, two fits, all through the verbs and all marked as invented. */
export async function seedMarkers(chemist: PersonActor, random: Random): Promise<void> {
  const ids = new Map((await listMarkers(chemist)).items.map((marker) => [marker.key, marker.id]))
  await saveMarkerFormula(chemist, {
    id: ids.get('furfural') ?? '',
    formula: '(80 + 35 * fast_index / minute) * exp(-dose / (60 * minute))',
    unit: 'µg/g',
    note: 'Demo formula, invented.',
    seenNumber: 0,
  })
  const barrels = await scoredBarrels(chemist)
  if (barrels.length < barrelCount) return
  for (const fit of demoFits) {
    await fitMarkerResponse(chemist, {
      id: ids.get(fit.key) ?? '',
      family: fit.family,
      unit: 'µg/g',
      matrix: 'Toasted oak, shavings',
      extraction: 'Model wine, 10 g/L, 14 days',
      samplePosition: 'Bilge, side A',
      sampleFromMm: 0,
      sampleToMm: 4,
      place: { height: 'bilge', side: 'A', depthMm: 2, mounting: 'wedge' },
      rows: rowsOf(fit, spreadOut(barrels), random.fork(fit.key)),
      note: 'Demo results, invented: no laboratory measured them.',
      seenNumber: 0,
    })
  }
}

type Barrel = { serial: string; doseMin: number }

/** Barrels with a whole score, by dose. */
async function scoredBarrels(chemist: PersonActor): Promise<Barrel[]> {
  const { items } = await listFirings(chemist, listFiringsQuery.parse({ state: 'finished', limit: 200 }))
  return items
    .flatMap(({ piece, score }) => {
      const doseMin = score === null || score.verdict === 'incomplete' ? null : score.doseMinutes
      return doseMin === null ? [] : [{ serial: piece.serial, doseMin }]
    })
    .sort((one, other) => one.doseMin - other.doseMin)
}

/** As many as a fit takes, evenly over the barrels in order of dose, both ends included. */
function spreadOut(barrels: readonly Barrel[]): Barrel[] {
  return Array.from({ length: barrelCount }, (_, i) => {
    const barrel = barrels[Math.round((i * (barrels.length - 1)) / (barrelCount - 1))]
    return barrel === undefined ? [] : [barrel]
  }).flat()
}

function rowsOf(fit: DemoFit, barrels: readonly Barrel[], random: Random): string {
  return barrels
    .map(({ serial, doseMin }) => {
      const value = fit.contentOf(doseMin) + fit.spread * random.gaussian()
      const text = value < fit.limit ? `<${fit.limit}` : value.toFixed(value < 20 ? 2 : 1)
      return `${serial}\t${text}`
    })
    .join('\n')
}
