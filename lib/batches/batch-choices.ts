import type { Actor } from '@/lib/auth/actor'
import { isAllowed } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'

type Choice = { value: string; label: string }

/** What a new batch is made from, for those who may make one; null for others. */
export async function batchChoices(
  actor: Actor,
): Promise<{ customers: Choice[]; versions: Choice[] } | null> {
  if (!isAllowed(actor, 'batches:write')) return null
  const em = await forkEm()
  const customers = await queryRows<{ id: string; name: string }>(
    em,
    'select id, name from customers order by name',
  )
  const versions = await queryRows<{ id: string; name: string; number: number; size_and_shape: string }>(
    em,
    `select v.id, r.name, v.number, v.size_and_shape from recipe_versions v join recipes r on r.id = v.recipe_id
      where v.state = 'approved' order by r.name`,
  )
  return {
    customers: customers.map((row) => ({ value: row.id, label: row.name })),
    versions: versions.map((row) => ({
      value: row.id,
      label: `${row.name}, version ${row.number} (${row.size_and_shape})`,
    })),
  }
}
