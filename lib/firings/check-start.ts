import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import type { RecipeContent } from '@/lib/recipes/schema'

export type StartProbe = {
  id: string
  name: string
  role: 'lead' | 'opposite' | 'coals'
  height: string
  side: string
  depth_mm: number
  mounting: string
  may_replay: boolean
  due_at: Date | null
}

type Chosen = { lead: string; opposite: string | null; coals: string | null }

const probeSelect = `
  select p.id, p.name, p.usual_role as role, p.height, p.side, p.depth_mm, p.mounting, g.may_replay,
         (select min(k.due_at) from (select distinct on (kind) due_at from probe_checks
           where probe_id = p.id order by kind, checked_at desc) k) as due_at
    from probes p join gateways g on g.id = p.gateway_id`

/** The probes of a firing: those chosen, or the hearth's usual ones. @throws AppError 'invalid' */
export async function findStartProbes(
  em: EntityManager,
  hearthId: string,
  chosen: Chosen | undefined,
): Promise<StartProbe[]> {
  if (chosen === undefined) {
    const usual = await queryRows<StartProbe>(
      em,
      `${probeSelect} where p.hearth_id = ? and p.retired_at is null and p.usual_role <> 'spare' order by p.channel`,
      [hearthId],
    )
    if (!usual.some((probe) => probe.role === 'lead')) {
      throw invalidField(
        'probes',
        'This hearth has no lead probe. Choose one, or ask the administrator to set it.',
      )
    }
    return firstOfEachRole(usual)
  }
  const wanted = [
    ['lead', chosen.lead],
    ['opposite', chosen.opposite],
    ['coals', chosen.coals],
  ] as const
  const found: StartProbe[] = []
  for (const [role, id] of wanted) {
    if (id === null) continue
    const [probe] = await queryRows<StartProbe>(
      em,
      `${probeSelect} where p.id = ? and p.retired_at is null`,
      [id],
    )
    if (probe === undefined) throw invalidField(`probes.${role}`, 'Choose a probe that is in use.')
    found.push({ ...probe, role })
  }
  return found
}

function firstOfEachRole(probes: readonly StartProbe[]): StartProbe[] {
  return probes.filter((probe, index) => probes.findIndex((other) => other.role === probe.role) === index)
}

/** A dose is comparable at one place only. @throws AppError 'invalid' naming both places */
export function requireSamePlace(lead: StartProbe, place: RecipeContent['leadPlace']): void {
  const isSame =
    lead.height === place.height &&
    lead.side === place.side &&
    lead.depth_mm === place.depthMm &&
    lead.mounting === place.mounting
  if (isSame) return
  throw invalidField(
    'probes.lead',
    `The recipe reads at ${place.height}, side ${place.side}, ${place.depthMm} mm, ${place.mounting}; ` +
      `${lead.name} sits at ${lead.height}, side ${lead.side}, ${lead.depth_mm} mm, ${lead.mounting}. ` +
      'Move the probe or choose another: curves are compared at one place only.',
  )
}

export type OutOfDate = { waterCheckId: string | null; faults: string[] }

/** What is out of date: the water, the lead probe's check. Both may be overridden with a signature. */
export async function findOutOfDate(em: EntityManager, lead: StartProbe, at: Date): Promise<OutOfDate> {
  const [water] = await queryRows<{ id: string; due_at: Date }>(
    em,
    'select id, due_at from water_checks where checked_at <= ? order by checked_at desc limit 1',
    [at],
  )
  const faults: string[] = []
  if (water === undefined || new Date(water.due_at) <= at) faults.push('The water check is out of date.')
  if (lead.due_at === null) faults.push(`${lead.name} has never been checked.`)
  else if (new Date(lead.due_at) <= at) faults.push(`The check of ${lead.name} is out of date.`)
  return { waterCheckId: water?.id ?? null, faults }
}

/** @throws AppError 'conflict' with the way out. */
export function refuseOutOfDate(faults: readonly string[]): never {
  throw new AppError(
    'conflict',
    `${faults.join(' ')} Check it first, or start with a signed override and its reason.`,
    { fields: { override: 'Sign the override with your password and the reason.' } },
  )
}
