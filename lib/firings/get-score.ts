import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { forkEm, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { getFiring } from '@/lib/firings/get-firing'
import { isLive } from '@/lib/firings/firing-states'
import type { scoreSchema } from '@/lib/firings/schema'

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

/** The newest score of a firing that the actor may read. @throws AppError 'not found' while there is none, saying why */
export async function getScore(actor: Actor, input: { id: string }): Promise<ScoreDto> {
  const firing = await getFiring(actor, input)
  const [row] = await queryRows<ScoreRow>(
    await forkEm(),
    `select number, ruleset, site_settings_version, seal_revision, computed_at, verdict, points, dose_minutes,
            dose_low_minutes, dose_high_minutes, plan_dose_minutes, delta_log10_dose, toast_depth_mm, result
       from scores where firing_id = ? order by number desc limit 1`,
    [input.id],
  )
  if (row === undefined) {
    if (firing.state === 'abandoned') throw new AppError('not found', 'An abandoned firing has no score.')
    if (firing.state === 'queued' || isLive(firing.state)) {
      throw new AppError('not found', 'There is no score before the firing is finished.')
    }
    throw new AppError(
      'not found',
      'The score is made once the gateway has sent the last readings. Look again in a moment.',
    )
  }
  return {
    firingId: input.id,
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
