import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '@/lib/auth/actor'
import { verifyPassword } from '@/lib/auth/password'
import { requirePerson } from '@/lib/auth/permissions'
import { countPasswordProof, forgiveTry } from '@/lib/auth/throttle'
import { queryRows } from '@/lib/db/orm'
import { invalidField } from '@/lib/errors'
import { now } from '@/lib/runtime'

export type SignatureInput = {
  /** The signer's password, asked for again. */
  password: string
  /** What the signature says, in the first person; 1 to 200 characters. */
  meaning: string
  /** Up to 2000 characters. */
  reason?: string | undefined
  /** What is signed: its kind, its uuid, and the SHA-256 (hex) of exactly what the signer saw. */
  subject: { type: string; id: string; sha256: string }
}

export type SignatureDto = {
  id: string
  accountId: string
  name: string
  role: string
  meaning: string
  reason: string | null
  signedAt: string
}

/**
 * Signs in the caller's transaction: the person proves himself by password, and name, role, time, meaning and the
 * subject's hash are kept for ever. Wrong tries are counted on a connection of their own, so that they stay counted
 * when the caller's transaction is undone.
 * @throws AppError 'invalid' naming `password`, 'too many', 'not allowed' for the system.
 */
export async function signAs(
  em: EntityManager,
  actor: Actor,
  { password, meaning, reason, subject }: SignatureInput,
): Promise<SignatureDto> {
  const person = requirePerson(actor)
  await provePassword(em, person.accountId, password, 'password')
  const signedAt = now()
  const [row] = await queryRows<{ id: string }>(
    em,
    `insert into signatures (account_id, account_name, account_role, meaning, reason,
                             subject_type, subject_id, subject_sha256, signed_at)
     values (?, ?, ?, ?, ?, ?, ?, ?, ?) returning id`,
    [
      person.accountId,
      person.name,
      person.role,
      meaning,
      reason ?? null,
      subject.type,
      subject.id,
      subject.sha256,
      signedAt,
    ],
  )
  if (row === undefined) throw new Error('The signature was not stored')
  return {
    id: row.id,
    accountId: person.accountId,
    name: person.name,
    role: person.role,
    meaning,
    reason: reason ?? null,
    signedAt: signedAt.toISOString(),
  }
}

/** Holds a signed-in person to his password. @throws AppError 'invalid' naming `field`, or 'too many'. */
export async function provePassword(
  em: EntityManager,
  accountId: string,
  password: string,
  field: string,
): Promise<void> {
  const tried = await countPasswordProof(accountId)
  const [row] = await queryRows<{ password_hash: string | null }>(
    em,
    `select password_hash from accounts where id = ? and state = 'active'`,
    [accountId],
  )
  if (!(await verifyPassword(row?.password_hash ?? null, password))) {
    throw invalidField(field, 'This is not your password. Write it again.')
  }
  await forgiveTry(tried)
}
