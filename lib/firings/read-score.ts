import type { EntityManager } from '@mikro-orm/postgresql'
import * as z from 'zod'
import { queryRows } from '@/lib/db/orm'
import type { scoreSchema } from '@/lib/firings/schema'
import type { Score } from '@/lib/science/score-types'

export type ScoreDto = z.infer<typeof scoreSchema>

type ScoreRow = {
  number: number
  ruleset: number
  site_settings_version: number
  seal_revision: number
  computed_at: Date
  verdict: ScoreDto['verdict']
  points: number | null
  dose_minutes: number | null
  dose_low_minutes: number | null
  dose_high_minutes: number | null
  plan_dose_minutes: number
  delta_log10_dose: number | null
  toast_depth_mm: number | null
  result: unknown
}

/** The newest score of a firing, unauthorised; null while there is none. */
export async function readScore(em: EntityManager, firingId: string): Promise<ScoreDto | null> {
  const [row] = await queryRows<ScoreRow>(
    em,
    `select number, ruleset, site_settings_version, seal_revision, computed_at, verdict, points, dose_minutes,
            dose_low_minutes, dose_high_minutes, plan_dose_minutes, delta_log10_dose, toast_depth_mm, result
       from scores where firing_id = ? order by number desc limit 1`,
    [firingId],
  )
  if (row === undefined) return null
  return {
    firingId,
    number: row.number,
    ruleset: row.ruleset,
    siteSettingsVersion: row.site_settings_version,
    sealRevision: row.seal_revision,
    computedAt: new Date(row.computed_at).toISOString(),
    verdict: row.verdict,
    points: row.points,
    doseMinutes: row.dose_minutes,
    doseLowMinutes: row.dose_low_minutes,
    doseHighMinutes: row.dose_high_minutes,
    planDoseMinutes: row.plan_dose_minutes,
    deltaLog10Dose: row.delta_log10_dose,
    toastDepthMm: row.toast_depth_mm,
    result: row.result,
  }
}

const storedSchema = z.looseObject({
  ruleset: z.literal(1),
  terms: z.array(z.unknown()),
  gaps: z.array(z.unknown()),
  stages: z.array(z.unknown()),
})

/**
 * The whole of a stored score. The parsed boundary: what ruleset 1 wrote is read back as ruleset 1's shape.
 * @throws Error for a row of another ruleset, which this build cannot show
 */
export function scoreResultOf(result: unknown): Score {
  const stored = storedSchema.safeParse(result)
  if (!stored.success) throw new Error('This score was made with a ruleset that is not known here')
  return result as Score
}
