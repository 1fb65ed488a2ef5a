import type { CarbonMonoxideDay, ExposureKind, HeatDay, HeatLimits } from '@/lib/conditions/schema'
import { nioshLimitsC } from '@/lib/science/exposure'
import { coveredHours, dayMean8hPpm, heldSegments, hottestMeanC } from '@/lib/science/exposure-record'
import type { RoomSettings } from '@/lib/site/room-settings'

/** A reading as the means are made of it. */
export type StandingPoint = {
  kind: ExposureKind
  subject: string
  atMs: number
  value: number
  peak: number
}

type Exposure = RoomSettings['exposure']

/** ISO 7243 averages steady work over an hour. */
const HEAT_WINDOW_MIN = 60

/** A day's carbon monoxide, a line a subject: 8-hour mean and peak against the site's limits. `untilMs`: its end, or now. */
export function carbonMonoxideStanding(
  points: readonly StandingPoint[],
  exposure: Exposure,
  untilMs: number,
): CarbonMonoxideDay[] {
  return bySubject(points, 'carbon monoxide', untilMs).map(([subject, own]) => {
    const held = heldSegments(own, { holdsMin: exposure.readingHoldsMin, untilMs })
    const mean8hPpm = dayMean8hPpm(held) ?? 0
    const highest = own.reduce((most, point) => (point.peak > most.peak ? point : most))
    const latest = own.reduce((last, point) => (point.atMs > last.atMs ? point : last))
    return {
      subject,
      readingCount: own.length,
      coveredH: coveredHours(held),
      mean8hPpm,
      peakPpm: highest.peak,
      peakAt: iso(highest.atMs),
      latest: { at: iso(latest.atMs), ppm: latest.value },
      over: exposure.carbonMonoxideLimits.filter(
        (limit) => (limit.kind === 'ceiling' ? highest.peak : mean8hPpm) > limit.ppm,
      ),
    }
  })
}

/** A day's heat, a line a subject: the hottest hour against the limits at the site's metabolic rate. */
export function heatStanding(
  points: readonly StandingPoint[],
  exposure: Exposure,
  untilMs: number,
): HeatDay[] {
  const limits = heatLimits(exposure)
  return bySubject(points, 'heat', untilMs).flatMap(([subject, own]) => {
    const held = heldSegments(own, { holdsMin: exposure.readingHoldsMin, untilMs })
    const hottest = hottestMeanC(held, HEAT_WINDOW_MIN)
    const latest = own.reduce((last, point) => (point.atMs > last.atMs ? point : last))
    if (hottest === null) return []
    return [
      {
        subject,
        readingCount: own.length,
        coveredH: coveredHours(held),
        hottestHourC: hottest.meanC,
        hottestUntil: iso(Math.min(hottest.untilMs, untilMs)),
        latest: { at: iso(latest.atMs), wbgtC: latest.value },
        over: overHeat(hottest.meanC, limits),
      },
    ]
  })
}

export function heatLimits({ metabolicRateW, heatSource }: Exposure): HeatLimits {
  const { ral, rel } = nioshLimitsC(metabolicRateW)
  return { metabolicRateW, alertC: ral, exposureC: rel, source: heatSource }
}

function overHeat(meanC: number, { alertC, exposureC }: HeatLimits): HeatDay['over'] {
  if (meanC > exposureC) return 'exposure limit'
  return meanC > alertC ? 'alert limit' : 'none'
}

/** Letter case aside; named as the first reading names it. What lies after the end has no time to stand. */
function bySubject(
  points: readonly StandingPoint[],
  kind: ExposureKind,
  untilMs: number,
): [string, StandingPoint[]][] {
  const groups = new Map<string, [string, StandingPoint[]]>()
  for (const point of points) {
    if (point.kind !== kind || point.atMs >= untilMs) continue
    const key = point.subject.toLowerCase()
    const group = groups.get(key) ?? [point.subject, []]
    group[1].push(point)
    groups.set(key, group)
  }
  return [...groups.values()].sort(([a], [b]) => a.localeCompare(b))
}

function iso(atMs: number): string {
  return new Date(atMs).toISOString()
}
