import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import type { ProbeAssignment } from '@/lib/ingest/firing-probes'
import { readFiringProbes } from '@/lib/ingest/firing-probes'
import type { FiringState } from '@/lib/live/events'
import type { Plan } from '@/lib/recipes/plan-of'
import { planOf } from '@/lib/recipes/plan-of'
import type { RecipeContent } from '@/lib/recipes/schema'
import { recipeCopySchema } from '@/lib/recipes/schema'
import type { SiteRules } from '@/lib/science/site-rules'
import { siteOfVersion } from '@/lib/site/current-site'

export type LiveMark = { kind: string; atMs: number; stagePosition: number | null }

/** What the hub knows of a firing besides its readings; instants in ms since 1970 UTC. */
export type FiringFacts = {
  firingId: string
  revision: number
  state: FiringState['state']
  hearthNumber: number | null
  serial: string
  preheatMs: number
  bendMs: number | null
  toastMs: number | null
  restMs: number | null
  endedMs: number | null
  moisturePercent: number | null
  recipeName: string
  content: RecipeContent
  plan: Plan
  rules: SiteRules
  assignments: ProbeAssignment[]
  /** In force, in time order. */
  marks: LiveMark[]
}

type Row = {
  id: string
  revision: number
  state: FiringState['state']
  hearth_number: number | null
  serial: string
  preheat_at: Date
  bend_at: Date | null
  toast_at: Date | null
  rest_at: Date | null
  ended_at: Date | null
  moisture_percent: number | null
  recipe_copy: unknown
  site_settings_version: number
}

/** Reads a started firing; null when there is none or it is still queued. */
export async function readFiringFacts(em: EntityManager, firingId: string): Promise<FiringFacts | null> {
  const [row] = await queryRows<Row>(
    em,
    `select f.id, f.revision, f.state, p.serial, f.preheat_at, f.bend_at, f.toast_at, f.rest_at, f.ended_at,
            f.moisture_percent, f.recipe_copy, f.site_settings_version,
            (select h.number from firing_placements pl join hearths h on h.id = pl.hearth_id
              where pl.firing_id = f.id order by pl.from_at desc limit 1) as hearth_number
       from firings f join pieces p on p.id = f.piece_id
      where f.id = ? and f.preheat_at is not null and f.recipe_copy is not null`,
    [firingId],
  )
  if (row === undefined) return null
  const { rules } = await siteOfVersion(em, row.site_settings_version)
  const copy = recipeCopySchema.parse(row.recipe_copy)
  return {
    firingId: row.id,
    revision: row.revision,
    state: row.state,
    hearthNumber: row.hearth_number,
    serial: row.serial,
    preheatMs: new Date(row.preheat_at).getTime(),
    bendMs: toMs(row.bend_at),
    toastMs: toMs(row.toast_at),
    restMs: toMs(row.rest_at),
    endedMs: toMs(row.ended_at),
    moisturePercent: row.moisture_percent,
    recipeName: copy.recipeName,
    content: copy.content,
    plan: planOf(copy.content, rules.dose),
    rules,
    assignments: await readFiringProbes(em, firingId),
    marks: await readMarksInForce(em, firingId),
  }
}

async function readMarksInForce(em: EntityManager, firingId: string): Promise<LiveMark[]> {
  const rows = await queryRows<{ kind: string; at: Date; stage_position: number | null }>(
    em,
    `select m.kind, m.at, m.stage_position from marks m
      where m.firing_id = ? and m.kind <> 'undone'
        and not exists (select from marks r where r.replaces_id = m.id)
      order by m.at, m.recorded_at, m.id`,
    [firingId],
  )
  return rows.map((row) => ({
    kind: row.kind,
    atMs: new Date(row.at).getTime(),
    stagePosition: row.stage_position,
  }))
}

/** What tells that a live firing has changed without reading it whole. */
export type LiveStamp = { firingId: string; stamp: string }

export async function readLiveStamps(em: EntityManager): Promise<LiveStamp[]> {
  return queryRows<LiveStamp>(
    em,
    `select f.id as "firingId", concat_ws(' ', f.revision, f.state,
        (select count(*) from marks m where m.firing_id = f.id),
        (select string_agg(concat(fp.probe_id, fp.from_at, fp.until_at), ',' order by fp.id)
           from firing_probes fp where fp.firing_id = f.id)) as stamp
       from firings f where f.state in ('preheating', 'bending', 'toasting', 'resting') order by f.id`,
  )
}

function toMs(at: Date | null): number | null {
  return at === null ? null : new Date(at).getTime()
}
