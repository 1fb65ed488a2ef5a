import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import type { HearthDto } from '@/lib/probes/schema'

type HearthRow = {
  id: string
  number: number
  name: string
  is_active: boolean
  firing_id: string | null
  state: 'preheating' | 'bending' | 'toasting' | 'resting'
  serial: string
  recipe_name: string
  version_number: number
  toaster_name: string
  probes: { id: string; name: string; usual_role: 'lead' | 'opposite' | 'coals' | 'spare' }[] | null
}

/** All hearths by number, each with what stands there now and the probes that usually do. */
export async function listHearths(actor: Actor): Promise<{ items: HearthDto[]; nextCursor: null }> {
  requirePermission(actor, 'room:read')
  const rows = await queryRows<HearthRow>(
    await forkEm(),
    `select h.id, h.number, h.name, h.is_active, f.id as firing_id, f.state, p.serial,
            f.recipe_copy->>'recipeName' as recipe_name, (f.recipe_copy->>'versionNumber')::int as version_number,
            a.name as toaster_name,
            (select json_agg(json_build_object('id', q.id, 'name', q.name, 'usual_role', q.usual_role) order by q.channel)
               from probes q where q.hearth_id = h.id and q.retired_at is null) as probes
       from hearths h
       left join firing_placements w on w.hearth_id = h.id and w.until_at is null
       left join firings f on f.id = w.firing_id and f.state in ('preheating', 'bending', 'toasting', 'resting')
       left join pieces p on p.id = f.piece_id
       left join accounts a on a.id = f.toaster_id
      order by h.number`,
  )
  return { items: rows.map(toHearth), nextCursor: null }
}

function toHearth(row: HearthRow): HearthDto {
  return {
    id: row.id,
    number: row.number,
    name: row.name,
    isActive: row.is_active,
    live:
      row.firing_id === null
        ? null
        : {
            firingId: row.firing_id,
            state: row.state,
            serial: row.serial,
            recipeName: row.recipe_name,
            versionNumber: row.version_number,
            toasterName: row.toaster_name,
          },
    probes: (row.probes ?? []).map((probe) => ({
      id: probe.id,
      name: probe.name,
      usualRole: probe.usual_role,
    })),
  }
}
