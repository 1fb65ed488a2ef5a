import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'

/** Customers that a recipe may be filtered by or made for, by name; empty for those who see approved recipes only. */
export async function recipeChoices(
  actor: Actor,
): Promise<{ customers: { value: string; label: string }[]; canWrite: boolean }> {
  requirePermission(actor, 'recipes:read')
  const canWrite = isAllowed(actor, 'recipes:write')
  if (!isAllowed(actor, 'recipes:read unapproved')) return { customers: [], canWrite }
  const rows = await queryRows<{ id: string; name: string }>(
    await forkEm(),
    'select id, name from customers order by lower(name)',
  )
  return { customers: rows.map((row) => ({ value: row.id, label: row.name })), canWrite }
}
