import type { EntityManager } from '@mikro-orm/postgresql'
import type { IssuedLink } from '@/lib/accounts/account-links'
import { issueLink } from '@/lib/accounts/account-links'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import { systemActor } from '@/lib/auth/actor'
import { inTransaction, queryRows } from '@/lib/db/orm'

/**
 * A link by which the first administrator is made, for set-up to print; null once any account exists. A new link ends
 * the older one. Only who can read the server's own output gets it.
 */
export async function createFirstAdministratorLink(): Promise<IssuedLink | null> {
  return inTransaction(async (em) => {
    if (await isAnyAccountThere(em)) return null
    const link = await issueLink(em, 'first administrator', null)
    await writeAuditEntry(em, systemActor('set-up'), 'site.first administrator link made', {
      type: 'site',
      id: '1',
    })
    return link
  })
}

export async function isAnyAccountThere(em: EntityManager): Promise<boolean> {
  const rows = await queryRows(em, 'select 1 from accounts limit 1')
  return rows.length > 0
}
