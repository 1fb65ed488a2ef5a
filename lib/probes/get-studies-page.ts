import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import type { Page } from '@/lib/http/cursor'
import { listProbes } from '@/lib/probes/list-probes'
import { listStudies } from '@/lib/probes/list-studies'
import type { ProbeDto } from '@/lib/probes/schema'
import type { listStudiesQuery, StudyDto } from '@/lib/probes/study-schema'
import { smallestHonestTolerance } from '@/lib/recipes/honest-tolerance'
import { sameMountHalfLog10 } from '@/lib/science/same-mount'
import type { SiteRules } from '@/lib/science/site-rules'
import { currentSite } from '@/lib/site/current-site'

export type StudiesPage = {
  studies: Page<StudyDto>
  /** In use, for a new study; coals probes left out. */
  probes: ProbeDto[]
  rules: Pick<SiteRules, 'errors' | 'dose'>
  /** With drift, k = 2, log10. */
  halfWidthLog10: number
  smallestToleranceLog10: number
  timeZone: string
  mayCheck: boolean
}

/** What this room can judge: the figure in force, and the studies that it could come from. */
export async function getStudiesPage(
  actor: Actor,
  query: z.infer<typeof listStudiesQuery>,
): Promise<StudiesPage> {
  requirePermission(actor, 'checks:read')
  const [studies, probes, { rules, timeZone }] = await Promise.all([
    listStudies(actor, { ...query, limit: 20 }),
    listProbes(actor, { sort: 'hearth', limit: 200 }),
    currentSite(),
  ])
  return {
    studies,
    probes: probes.items.filter((probe) => probe.place.height !== 'coals'),
    rules: { errors: rules.errors, dose: rules.dose },
    halfWidthLog10: sameMountHalfLog10(rules),
    smallestToleranceLog10: smallestHonestTolerance(rules),
    timeZone,
    mayCheck: isAllowed(actor, 'checks:write'),
  }
}
