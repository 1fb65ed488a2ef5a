import { GatewayEnrolmentEntity } from '@/entities/gateway-enrolment'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { codeSha256, makeCode } from '@/lib/ingest/enrolment-code'
import { requireGatewayInUse } from '@/lib/ingest/require-gateway-in-use'
import type { EnrolmentCode } from '@/lib/ingest/schema'
import { now } from '@/lib/runtime'

const validMs = 30 * 60_000

/** Makes the one-time code by which a gateway's program fetches its token: shown once, 30 minutes, a new one ends the old. */
export async function makeEnrolmentCode(actor: Actor, input: { gatewayId: string }): Promise<EnrolmentCode> {
  requirePermission(actor, 'room:write')
  const person = requirePerson(actor)
  const code = makeCode()
  return inTransaction(async (em) => {
    const gateway = await requireGatewayInUse(em, input.gatewayId)
    const at = now()
    await queryRows(
      em,
      'update gateway_enrolments set cancelled_at = ? where gateway_id = ? and used_at is null and cancelled_at is null',
      [at, gateway.id],
    )
    const expiresAt = new Date(at.getTime() + validMs)
    const row = em.create(GatewayEnrolmentEntity, {
      gatewayId: gateway.id,
      codeSha256: codeSha256(code),
      createdAt: at,
      createdBy: person.accountId,
      expiresAt,
    })
    await em.persistAndFlush(row)
    await writeAuditEntry(
      em,
      actor,
      'gateway.enrolment code made',
      { type: 'gateway', id: gateway.id },
      { enrolmentId: row.id, gateway: gateway.name },
    )
    return { code, expiresAt: expiresAt.toISOString() }
  })
}
