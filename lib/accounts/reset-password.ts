import { findLink, spendLink } from '@/lib/accounts/account-links'
import { checkNewPassword } from '@/lib/accounts/check-new-password'
import { mailPasswordChanged } from '@/lib/accounts/mail-password-changed'
import { readActorInTransaction } from '@/lib/accounts/read-actor'
import type { ResetPasswordBody } from '@/lib/accounts/schema'
import { endSessions } from '@/lib/accounts/sessions'
import { storePassword } from '@/lib/accounts/store-password'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import { hashPassword } from '@/lib/auth/password'
import { forkEm, inTransaction } from '@/lib/db/orm'

/**
 * Chooses a new password by a reset link; every session of the account ends and the person signs in anew.
 * @throws AppError 'not found' for a spent link, 'invalid' naming `password`.
 */
export async function resetPassword(input: ResetPasswordBody): Promise<void> {
  const seen = await findLink(await forkEm(), input.token)
  checkNewPassword(input.password, { email: seen.email ?? '', name: seen.name ?? '' })
  const passwordHash = await hashPassword(input.password)
  await inTransaction(async (em) => {
    const { accountId } = await spendLink(em, input.token, 'password reset')
    if (accountId === null) throw new Error('A reset link without an account')
    await storePassword(em, accountId, passwordHash)
    const endedSessions = await endSessions(em, accountId)
    const actor = await readActorInTransaction(em, accountId, 'reset')
    await writeAuditEntry(
      em,
      actor,
      'account.password reset',
      { type: 'account', id: accountId },
      {
        endedSessions,
      },
    )
  })
  mailPasswordChanged({ email: seen.email ?? '', name: seen.name ?? '' })
}
