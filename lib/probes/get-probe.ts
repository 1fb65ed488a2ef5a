import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import type { ProbeDetailDto, ProbePlaceDto } from '@/lib/probes/schema'
import type { ProbeRow } from '@/lib/probes/to-probe'
import { checksOf, probeSelect, toProbe } from '@/lib/probes/to-probe'
import { currentSite } from '@/lib/site/current-site'

type PlaceRow = {
  gateway_id: string
  gateway_name: string
  channel: number
  hearth_number: number | null
  usual_role: ProbePlaceDto['usualRole']
  height: ProbePlaceDto['height']
  side: string
  depth_mm: number
  mounting: ProbePlaceDto['mounting']
  from_at: Date
  until_at: Date | null
  changed_by: string | null
}

/** One probe, in use or retired: where it is and was, and every check. @throws AppError 'not found' */
export async function getProbe(actor: Actor, input: { id: string }): Promise<ProbeDetailDto> {
  requirePermission(actor, 'room:read')
  const em = await forkEm()
  const [row] = await queryRows<ProbeRow>(em, `${probeSelect()} where p.id = ?`, [input.id])
  if (row === undefined) throw new AppError('not found', 'There is no such probe.')
  const { dueSoonDays } = (await currentSite(em)).rules.checks
  return {
    ...toProbe(row, dueSoonDays),
    createdAt: new Date(row.created_at).toISOString(),
    places: await readPlaces(em, input.id),
    allChecks: checksOf(row),
  }
}

/** A place that was corrected at the instant it was given never held, and is left out. */
async function readPlaces(em: EntityManager, probeId: string): Promise<ProbePlaceDto[]> {
  const rows = await queryRows<PlaceRow>(
    em,
    `select w.gateway_id, g.name as gateway_name, w.channel, h.number as hearth_number, w.usual_role, w.height, w.side,
            w.depth_mm, w.mounting, w.from_at, w.until_at, a.name as changed_by
       from probe_places w
       join gateways g on g.id = w.gateway_id
       left join hearths h on h.id = w.hearth_id
       left join accounts a on a.id = w.changed_by
      where w.probe_id = ? and (w.until_at is null or w.until_at > w.from_at)
      order by w.from_at desc`,
    [probeId],
  )
  return rows.map((row) => ({
    gateway: { id: row.gateway_id, name: row.gateway_name },
    channel: row.channel,
    hearthNumber: row.hearth_number,
    usualRole: row.usual_role,
    height: row.height,
    side: row.side,
    depthMm: row.depth_mm,
    mounting: row.mounting,
    fromAt: new Date(row.from_at).toISOString(),
    untilAt: row.until_at === null ? null : new Date(row.until_at).toISOString(),
    changedBy: row.changed_by,
  }))
}
