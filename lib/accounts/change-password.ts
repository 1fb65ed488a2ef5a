import { checkNewPassword } from '@/lib/accounts/check-new-password'
import { readMe } from '@/lib/accounts/get-me'
import { mailPasswordChanged } from '@/lib/accounts/mail-password-changed'
import type { ChangePasswordBody } from '@/lib/accounts/schema'
import { endSessions } from '@/lib/accounts/sessions'
import { storePassword } from '@/lib/accounts/store-password'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { PersonActor } from '@/lib/auth/actor'
import { hashPassword } from '@/lib/auth/password'
import { requirePasswordSession } from '@/lib/auth/permissions'
import { provePassword } from '@/lib/auth/sign'
import { forkEm, inTransaction } from '@/lib/db/orm'
import { invalidField } from '@/lib/errors'

/**
 * Changes one's own password; every other session of the account and every open link of it ends.
 * @throws AppError 'invalid' naming `currentPassword` or `newPassword`, 'too many'.
 */
export async function changePassword(actor: PersonActor, input: ChangePasswordBody): Promise<void> {
  requirePasswordSession(actor)
  const em = await forkEm()
  await provePassword(em, actor.accountId, input.currentPassword, 'currentPassword')
  const me = await readMe(em, actor.accountId)
  if (input.newPassword === input.currentPassword) {
    throw invalidField('newPassword', 'This is the password that you have. Choose another.')
  }
  checkNewPassword(input.newPassword, me, 'newPassword')
  const passwordHash = await hashPassword(input.newPassword)
  await inTransaction(async (inner) => {
    await storePassword(inner, actor.accountId, passwordHash)
    const endedSessions = await endSessions(inner, actor.accountId, actor.sessionId)
    await writeAuditEntry(
      inner,
      actor,
      'account.password changed',
      { type: 'account', id: actor.accountId },
      {
        endedSessions,
      },
    )
  })
  mailPasswordChanged(me)
}
