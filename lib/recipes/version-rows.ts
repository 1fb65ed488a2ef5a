import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import type { VersionRow } from '@/lib/recipes/to-version'

/** A version with its names, its stages and cues in order, and its signatures: one statement however many. */
const versionSelect = `
  select v.*, r.name as recipe_name, author.name as author_name, approver.name as approved_by_name,
    returner.name as returned_by_name, withdrawer.name as withdrawn_by_name,
    coalesce((
      select json_agg(json_build_object('name', s.name, 'kind', s.kind, 'targetTempC', s.target_temp_c,
          'coalsTargetTempC', s.coals_target_temp_c, 'minutes', s.minutes, 'bandC', s.band_c, 'lid', s.lid,
          'cues', coalesce((
            select json_agg(json_build_object('action', c.action, 'minute', c.minute, 'words', c.words)
              order by c.position)
            from cues c where c.stage_id = s.id), '[]'::json))
        order by s.position)
      from stages s where s.version_id = v.id), '[]'::json) as stages,
    coalesce((
      select json_agg(json_build_object('name', g.account_name, 'role', g.account_role, 'meaning', g.meaning,
          'reason', g.reason, 'signedAt', g.signed_at) order by g.signed_at)
      from signatures g where g.subject_type = 'recipe version' and g.subject_id = v.id), '[]'::json) as signatures
  from recipe_versions v
  join recipes r on r.id = v.recipe_id
  join accounts author on author.id = v.author_id
  left join accounts approver on approver.id = v.approved_by
  left join accounts returner on returner.id = v.returned_by
  left join accounts withdrawer on withdrawer.id = v.withdrawn_by`

export async function versionRow(em: EntityManager, id: string): Promise<VersionRow | null> {
  const [row] = await queryRows<VersionRow>(em, `${versionSelect} where v.id = ?`, [id])
  return row ?? null
}

/** Every version of a recipe, the newest first. */
export async function versionRowsOfRecipe(em: EntityManager, recipeId: string): Promise<VersionRow[]> {
  return queryRows<VersionRow>(em, `${versionSelect} where v.recipe_id = ? order by v.number desc`, [
    recipeId,
  ])
}

/** The versions with these ids, in no order. */
export async function versionRowsByIds(em: EntityManager, ids: readonly string[]): Promise<VersionRow[]> {
  if (ids.length === 0) return []
  return queryRows<VersionRow>(em, `${versionSelect} where v.id in (?)`, [ids])
}
