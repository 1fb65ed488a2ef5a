import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'

type Option = { value: string; label: string }

/** What the firing list can be narrowed to: hearths, recipes that were fired, and (for those who compare) toasters. */
export async function firingFilterOptions(
  actor: Actor,
): Promise<{ hearths: Option[]; recipes: Option[]; toasters: Option[] }> {
  requirePermission(actor, 'firings:follow')
  const em = await forkEm()
  const hearths = await queryRows<{ number: number }>(em, 'select number from hearths order by number')
  const recipes = await queryRows<{ id: string; name: string }>(
    em,
    `select r.id, r.name from recipes r where exists (
       select 1 from recipe_versions v join firings f on f.recipe_version_id = v.id where v.recipe_id = r.id)
     order by r.name`,
  )
  const toasters = isAllowed(actor, 'firings:read all')
    ? await queryRows<{ id: string; name: string }>(
        em,
        'select a.id, a.name from accounts a where exists (select 1 from firings f where f.toaster_id = a.id) order by a.name',
      )
    : []
  const named = (rows: readonly { id: string; name: string }[]) =>
    rows.map((row) => ({ value: row.id, label: row.name }))
  return {
    hearths: hearths.map(({ number }) => ({ value: String(number), label: String(number) })),
    recipes: named(recipes),
    toasters: named(toasters),
  }
}
