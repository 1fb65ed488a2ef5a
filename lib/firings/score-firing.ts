import type { EntityManager } from '@mikro-orm/postgresql'
import { ForecastOutcomeEntity } from '@/entities/forecast-outcome'
import { ScoreEntity } from '@/entities/score'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { firingStaveHistory } from '@/lib/firings/firing-stave'
import { forecastOutcomeOf } from '@/lib/firings/forecast-outcome'
import { readFiring } from '@/lib/firings/read-firing'
import type { FiringDto } from '@/lib/firings/schema'
import { scoreInputOf } from '@/lib/firings/score-input'
import { makeSketch } from '@/lib/firings/sketch'
import { firingReadings } from '@/lib/ingest/firing-readings'
import { planOf } from '@/lib/recipes/plan-of'
import { now } from '@/lib/runtime'
import { scoreFiring as evaluate } from '@/lib/science/score'
import type { Score } from '@/lib/science/score-types'
import { siteOfVersion } from '@/lib/site/current-site'

/**
 * Scores a finished firing from its newest seal, against its recipe copy and the site rules that it was fired under.
 * The score is a new row beside any earlier one; the same seal is scored once by a ruleset.
 */
export async function scoreFiring(
  actor: Actor,
  input: { id: string },
): Promise<{ number: number; verdict: string }> {
  requirePermission(actor, 'firings:run')
  return inTransaction(async (em) => {
    await queryRows(em, 'select 1 from firings where id = ? for update', [input.id])
    const firing = await readFiring(em, input.id)
    if (firing.state !== 'finished')
      throw new AppError('conflict', `A firing that is ${firing.state} is not scored.`)
    const readings = await firingReadings(em, firing.id)
    if (readings.sealRevision === null) throw new AppError('conflict', 'The readings are not sealed yet.')
    const known = await findScore(em, firing.id, readings.sealRevision)
    if (known !== null) return known
    const { rules, version } = await siteOfVersion(em, firing.siteSettingsVersion ?? 1)
    const scoreInput = scoreInputOf(firing, readings, rules)
    if (scoreInput === null || firing.recipeCopy === null) {
      throw new AppError('conflict', 'A firing without toast or lead probe cannot be scored.')
    }
    const score = evaluate(scoreInput)
    const plan = planOf(firing.recipeCopy.content, rules.dose)
    const history = firingStaveHistory(firing, scoreInput, rules)
    const saved = {
      ...scoreColumns(score),
      firingId: firing.id,
      number: await nextNumber(em, firing),
      siteSettingsVersion: version,
      sealRevision: readings.sealRevision,
      sketch: makeSketch(plan, scoreInput.lead, history),
      computedAt: now(),
    }
    em.create(ScoreEntity, saved)
    await em.flush()
    const outcome = forecastOutcomeOf(scoreInput, plan, firing.recipeCopy.content)
    if (outcome !== null) {
      em.create(ForecastOutcomeEntity, { firingId: firing.id, scoreNumber: saved.number, ...outcome })
      await em.flush()
    }
    await writeAuditEntry(
      em,
      actor,
      'firing.scored',
      { type: 'firing', id: firing.id },
      {
        number: saved.number,
        ruleset: score.ruleset,
        verdict: score.verdict,
        points: score.points,
      },
    )
    return { number: saved.number, verdict: score.verdict }
  })
}

async function findScore(em: EntityManager, firingId: string, sealRevision: number) {
  const [row] = await queryRows<{ number: number; verdict: string }>(
    em,
    'select number, verdict from scores where firing_id = ? and seal_revision = ? and ruleset = 1 order by number desc limit 1',
    [firingId, sealRevision],
  )
  return row ?? null
}

async function nextNumber(em: EntityManager, firing: FiringDto): Promise<number> {
  const [row] = await queryRows<{ next: number }>(
    em,
    'select coalesce(max(number), 0) + 1 as next from scores where firing_id = ?',
    [firing.id],
  )
  return row?.next ?? 1
}

function scoreColumns(score: Score) {
  return {
    ruleset: score.ruleset,
    verdict: score.verdict,
    points: score.points,
    doseMinutes: score.dose?.doseMin ?? null,
    doseLowMinutes: score.dose?.sameMount.lowMin ?? null,
    doseHighMinutes: score.dose?.sameMount.highMin ?? null,
    planDoseMinutes: score.planDoseMin,
    deltaLog10Dose: score.deltaLog10,
    toastDepthMm: score.toastDepthMm?.value ?? null,
    result: score,
  }
}
