import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'

/** Holds a firing's alarms still until the transaction ends; the table's own guard takes the same lock. */
export async function lockAlarms(em: EntityManager, firingId: string): Promise<void> {
  await queryRows(em, `select pg_advisory_xact_lock(hashtext('emberstave.alarms'), hashtext(?))`, [firingId])
}
