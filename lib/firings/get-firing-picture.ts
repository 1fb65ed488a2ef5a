import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { firingCurves } from '@/lib/firings/firing-curves'
import { readFiringAlarms } from '@/lib/alarms/read-firing-alarms'
import { requireReadableFiring } from '@/lib/firings/may-read-firing'
import type { FiringPicture, ProbeCheckFact } from '@/lib/firings/picture-types'
import { readFiring } from '@/lib/firings/read-firing'
import { readScore, scoreResultOf } from '@/lib/firings/read-score'
import { toastReadings } from '@/lib/firings/toast-readings'
import { currentSite, siteOfVersion } from '@/lib/site/current-site'

/** Everything that the page of a firing draws: record, score, thinned curves, plan, stave, the probes' checks. */
export async function getFiringPicture(actor: Actor, input: { id: string }): Promise<FiringPicture> {
  requirePermission(actor, 'firings:follow')
  const em = await forkEm()
  const firing = await readFiring(em, input.id)
  requireReadableFiring(actor, firing)
  const site = await currentSite(em)
  const version = firing.siteSettingsVersion ?? site.version
  const { rules } = version === site.version ? site : await siteOfVersion(em, version)
  const [score, readings, checks, alarms] = await Promise.all([
    readScore(em, firing.id),
    firing.toastAt === null ? null : toastReadings(em, firing.id, firing.toastAt, rules.signals),
    readChecks(em, firing.id),
    readFiringAlarms(em, firing.id),
  ])
  const result = score === null ? null : scoreResultOf(score.result)
  return {
    firing,
    timeZone: site.timeZone,
    rules,
    score: score === null || result === null ? null : { ...score, result },
    curves:
      readings === null
        ? null
        : firingCurves(firing, readings, rules, { toastDepthMm: result?.toastDepthMm ?? null }),
    checks,
    alarms,
    isSealed: readings !== null && readings.sealRevision !== null,
  }
}

type CheckRow = {
  probe_id: string
  kind: ProbeCheckFact['kind']
  reference_temp_c: number
  uncertainty_c: number
  checked_at: Date
  was_overdue: boolean
}

/** The newest check of each kind and point that was made before the firing began, coldest first. */
async function readChecks(em: EntityManager, firingId: string): Promise<ProbeCheckFact[]> {
  const rows = await queryRows<CheckRow>(
    em,
    `select * from (
       select distinct on (c.probe_id, c.kind, round(c.reference_temp_c))
              c.probe_id, c.kind, c.reference_temp_c, c.uncertainty_c, c.checked_at,
              c.due_at <= f.preheat_at as was_overdue
         from probe_checks c join firings f on f.id = ?
        where c.probe_id in (select probe_id from firing_probes where firing_id = f.id)
          and c.checked_at <= f.preheat_at
        order by c.probe_id, c.kind, round(c.reference_temp_c), c.checked_at desc) newest
      order by probe_id, reference_temp_c`,
    [firingId],
  )
  return rows.map((row) => ({
    probeId: row.probe_id,
    kind: row.kind,
    referenceTempC: row.reference_temp_c,
    uncertaintyC: row.uncertainty_c,
    checkedAt: new Date(row.checked_at).toISOString(),
    wasOverdue: row.was_overdue,
  }))
}
