import type { EntityManager } from '@mikro-orm/postgresql'
import type { MeDto } from '@/lib/accounts/schema'
import type { PersonActor, Role } from '@/lib/auth/actor'
import { forkEm, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'

type MeRow = {
  id: string
  email: string
  name: string
  role: Role
  customer_id: string | null
  customer_name: string | null
  temperature_unit: 'C' | 'F'
}

/** Who is signed in. Everybody may know that of himself. */
export async function getMe(actor: PersonActor): Promise<MeDto> {
  return readMe(await forkEm(), actor.accountId)
}

export async function readMe(em: EntityManager, accountId: string): Promise<MeDto> {
  const [row] = await queryRows<MeRow>(
    em,
    `select a.id, a.email, a.name, a.role, a.customer_id, c.name as customer_name, a.temperature_unit
       from accounts a left join customers c on c.id = a.customer_id where a.id = ?`,
    [accountId],
  )
  if (row === undefined) throw new AppError('not found', 'There is no such account.')
  return {
    id: row.id,
    email: row.email,
    name: row.name,
    role: row.role,
    customer: row.customer_id === null ? null : { id: row.customer_id, name: row.customer_name ?? '' },
    temperatureUnit: row.temperature_unit,
  }
}
