import type { FiringDto } from '@/lib/firings/schema'
import { siteStaveOptions } from '@/lib/recipes/stave-of'
import type { ScoreInput } from '@/lib/science/score-types'
import type { SiteRules } from '@/lib/science/site-rules'
import type { StaveHistory, StaveHistoryOptions } from '@/lib/science/stave'
import { staveHistory } from '@/lib/science/stave'

/** The stave's constants for one firing: from its recipe copy, its measured moisture and the site's rules. */
export function staveOptionsOf(
  firing: Pick<FiringDto, 'recipeCopy' | 'moisturePercent'>,
  rules: SiteRules,
): Omit<StaveHistoryOptions, 'points'> {
  const content = firing.recipeCopy?.content
  return {
    thicknessMm: content?.thicknessMm ?? rules.stave.thicknessMm,
    probeDepthMm: content?.leadPlace.depthMm ?? 2,
    moisturePercent: firing.moisturePercent ?? rules.stave.moisturePercent,
    ...siteStaveOptions(rules),
  }
}

/**
 * The stave under the lead probe's curve from toast start to rest start, gaps joined straight (it is a model either
 * way, and says so). Null when there are not two readings.
 */
export function firingStaveHistory(
  firing: Pick<FiringDto, 'recipeCopy' | 'moisturePercent'>,
  input: Pick<ScoreInput, 'lead' | 'firing'>,
  rules: SiteRules,
  columns = 240,
): StaveHistory | null {
  const endS = input.firing.restStartS ?? Infinity
  const points: { timeS: number; tempC: number }[] = []
  for (let i = 0; i < input.lead.timeS.length; i += 1) {
    const timeS = input.lead.timeS[i] ?? 0
    const tempC = input.lead.tempC[i] ?? Number.NaN
    if (timeS >= 0 && timeS <= endS && !Number.isNaN(tempC)) points.push({ timeS, tempC })
  }
  const first = points[0]
  const last = points.at(-1)
  if (first === undefined || last === undefined || last.timeS - first.timeS < 1) return null
  return staveHistory({ ...staveOptionsOf(firing, rules), points, columns })
}
