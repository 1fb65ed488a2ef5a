import type { EntityManager } from '@mikro-orm/postgresql'
import { readMe } from '@/lib/accounts/get-me'
import type { PersonActor } from '@/lib/auth/actor'

/** The person of an account, in a transaction that has just made or renewed it. */
export async function readActorInTransaction(
  em: EntityManager,
  accountId: string,
  sessionId: string,
): Promise<PersonActor> {
  const me = await readMe(em, accountId)
  return {
    kind: 'person',
    accountId,
    sessionId,
    name: me.name,
    role: me.role,
    customerId: me.customer?.id ?? null,
    temperatureUnit: me.temperatureUnit,
  }
}
