import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import { leadCheckFaults } from '@/lib/probes/lead-check-faults'
import { waterFault } from '@/lib/probes/water-fault'
import type { RecipeContent } from '@/lib/recipes/schema'
import type { CheckRow } from '@/lib/science/probe-correction'
import type { SiteRules } from '@/lib/science/site-rules'
import { currentSite } from '@/lib/site/current-site'

export type StartProbe = {
  id: string
  name: string
  role: 'lead' | 'opposite' | 'coals'
  height: string
  side: string
  depth_mm: number
  mounting: string
  may_replay: boolean
}

type Chosen = { lead: string; opposite: string | null; coals: string | null }

const probeSelect = `
  select p.id, p.name, p.usual_role as role, p.height, p.side, p.depth_mm, p.mounting, g.may_replay
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

/**
 * What speaks against a start: water that was never checked, is out of date or above the site's limits; a lead probe
 * whose checks have run out or leave out where the dose is made. All may be overridden with a signature.
 */
export async function findOutOfDate(
  em: EntityManager,
  lead: StartProbe,
  at: Date,
  waterSource?: string,
): Promise<OutOfDate> {
  const water = await newestWater(em, at, waterSource)
  const { checks } = (await currentSite(em)).rules
  const faults = water === undefined ? ['The water was never checked.'] : waterFaults(water, at, checks)
  faults.push(...(await findLeadFaults(em, lead, at)))
  return { waterCheckId: water?.id ?? null, faults }
}

type Water = {
  id: string
  source: string
  due_at: Date
  tca_ng_per_l: number
  free_chlorine_mg_per_l: number
}

/** The newest check of the source that is used, or of whichever was checked last. */
async function newestWater(
  em: EntityManager,
  at: Date,
  source: string | undefined,
): Promise<Water | undefined> {
  const [water] = await queryRows<Water>(
    em,
    `select id, source, due_at, tca_ng_per_l, free_chlorine_mg_per_l from water_checks
      where checked_at <= ? and (?::text is null or lower(source) = lower(?))
      order by checked_at desc, id desc limit 1`,
    [at, source ?? null, source ?? null],
  )
  if (water === undefined && source !== undefined) {
    throw invalidField('waterSource', 'Choose a source of water that was checked.')
  }
  return water
}

function waterFaults(water: Water, at: Date, checks: SiteRules['checks']): string[] {
  const faults: string[] = []
  if (new Date(water.due_at) <= at) faults.push(`The water check of ${water.source} is out of date.`)
  const over = waterFault(
    { tcaNgPerL: water.tca_ng_per_l, freeChlorineMgPerL: water.free_chlorine_mg_per_l },
    checks,
  )
  if (over !== null) faults.push(`The water of ${water.source} is not to be used: ${over}`)
  return faults
}

/** What speaks against a lead probe alone: a firing that moves brings its water along. */
export async function findLeadFaults(em: EntityManager, lead: StartProbe, at: Date): Promise<string[]> {
  return leadCheckFaults(lead.name, await readChecks(em, lead.id), at.getTime())
}

async function readChecks(em: EntityManager, probeId: string): Promise<CheckRow[]> {
  type Row = Record<'reference_temp_c' | 'measured_temp_c' | 'uncertainty_c', number> &
    Record<'checked_at' | 'due_at', Date> & { kind: CheckRow['kind'] }
  const rows = await queryRows<Row>(
    em,
    `select kind, reference_temp_c, measured_temp_c, uncertainty_c, checked_at, due_at
       from probe_checks where probe_id = ?`,
    [probeId],
  )
  return rows.map((row) => ({
    kind: row.kind,
    referenceTempC: row.reference_temp_c,
    measuredTempC: row.measured_temp_c,
    uncertaintyC: row.uncertainty_c,
    checkedAtMs: new Date(row.checked_at).getTime(),
    dueAtMs: new Date(row.due_at).getTime(),
  }))
}

/** @throws AppError 'conflict' with the way out. */
export function refuseOutOfDate(faults: readonly string[]): never {
  throw new AppError(
    'conflict',
    `${faults.join(' ')} Check it first, or start with a signed override and its reason.`,
    { fields: { override: 'Sign the override with your password and the reason.' } },
  )
}
