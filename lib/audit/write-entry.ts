import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '@/lib/auth/actor'
import { queryRows } from '@/lib/db/orm'
import { now } from '@/lib/runtime'

export type AuditSubject = { type: string; id: string }

/**
 * Appends one entry to the hash-chained audit trail, in the caller's transaction. The database numbers and
 * chains it; entries of concurrent transactions wait for each other, so write it last.
 */
export async function writeAuditEntry(
  em: EntityManager,
  actor: Actor,
  action: string,
  subject: AuditSubject,
  detail: Record<string, unknown> = {},
): Promise<void> {
  await em.flush()
  await queryRows(
    em,
    `insert into audit_entries (at, actor_id, actor_name, action, subject_type, subject_id, detail)
     values (?, ?, ?, ?, ?, ?, ?::jsonb)`,
    [
      now(),
      actor.kind === 'person' ? actor.accountId : null,
      actor.name,
      action,
      subject.type,
      subject.id,
      JSON.stringify(withDevice(actor, detail)),
    ],
  )
}

/** What was done by PIN says at which device. */
function withDevice(actor: Actor, detail: Record<string, unknown>): Record<string, unknown> {
  if (actor.kind !== 'person' || actor.byPinAt === undefined) return detail
  return { ...detail, byPinAt: actor.byPinAt.deviceName }
}
