import { LockMode } from '@mikro-orm/core'
import type { EntityManager } from '@mikro-orm/postgresql'
import type * as z from 'zod'
import type { GatewayEnrolment } from '@/entities/gateway-enrolment'
import { GatewayEnrolmentEntity } from '@/entities/gateway-enrolment'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import { systemActor } from '@/lib/auth/actor'
import { countEnrolmentTry, forgiveTry } from '@/lib/auth/throttle'
import { inTransaction } from '@/lib/db/orm'
import { invalidField } from '@/lib/errors'
import { codeSha256, readCode } from '@/lib/ingest/enrolment-code'
import { insertToken, letNewReplace } from '@/lib/ingest/replace-tokens'
import { requireGatewayInUse } from '@/lib/ingest/require-gateway-in-use'
import type { EnrolledGateway, enrolGatewaySchema } from '@/lib/ingest/schema'
import { log } from '@/lib/log'
import { now } from '@/lib/runtime'

/**
 * Gives a gateway's program its device token for a one-time code. Tokens that the gateway had before serve until the
 * new one is first used, or 24 h at most: a box that is replaced goes on until its successor speaks.
 *
 * @throws AppError 'invalid' alike for a code that never was, is spent or has run out; 'too many'
 */
export async function enrolGateway(
  input: z.infer<typeof enrolGatewaySchema>,
  address: string,
): Promise<EnrolledGateway> {
  const tried = await countEnrolmentTry(address)
  const code = readCode(input.code)
  if (code === null) {
    throw invalidField(
      'code',
      'This is not a code from here: look at it letter by letter. It has 12 letters and digits.',
    )
  }
  const enrolled = await inTransaction((em) => redeem(em, code, input.name ?? ''))
  if (enrolled === null) {
    log().warn({ address }, 'a gateway came with a code that is not good')
    throw invalidField(
      'code',
      'This code is not good any more: it is used once, within 30 minutes. Ask for a new one.',
    )
  }
  await forgiveTry(tried)
  return enrolled
}

async function redeem(em: EntityManager, code: string, machineName: string): Promise<EnrolledGateway | null> {
  const at = now()
  const row = await em.findOne(
    GatewayEnrolmentEntity,
    { codeSha256: codeSha256(code) },
    { lockMode: LockMode.PESSIMISTIC_WRITE },
  )
  if (row === null || !isOpen(row, at)) return null
  const gateway = await requireGatewayInUse(em, row.gatewayId)
  const { id, token } = await insertToken(em, gateway.id, row.createdBy, at)
  em.assign(row, { usedAt: at, usedBy: machineName === '' ? null : machineName, tokenId: id })
  const replaced = await letNewReplace(em, { gatewayId: gateway.id, oldId: null, newId: id, at })
  await writeAuditEntry(
    em,
    systemActor('enrolment of a gateway'),
    'gateway.enrolled',
    { type: 'gateway', id: gateway.id },
    { enrolmentId: row.id, tokenId: id, machine: machineName, tokensReplaced: replaced },
  )
  return { token, gatewayId: gateway.id, gatewayName: gateway.name }
}

function isOpen(row: GatewayEnrolment, at: Date): boolean {
  return !row.usedAt && !row.cancelledAt && row.expiresAt > at
}
