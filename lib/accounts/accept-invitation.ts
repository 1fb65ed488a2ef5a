import type { FoundLink } from '@/lib/accounts/account-links'
import { findLink, spendLink } from '@/lib/accounts/account-links'
import { checkNewPassword } from '@/lib/accounts/check-new-password'
import type { AcceptInvitationBody } from '@/lib/accounts/schema'
import type { Device, StartedSession } from '@/lib/accounts/sessions'
import { startSession } from '@/lib/accounts/sessions'
import { storePassword } from '@/lib/accounts/store-password'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import { hashPassword } from '@/lib/auth/password'
import { readActorInTransaction } from '@/lib/accounts/read-actor'
import { forkEm, inTransaction, queryRows } from '@/lib/db/orm'

/**
 * Chooses the first password by an invitation's link and signs in. The link is the authority; it is spent only when
 * the password will do. A name may be put right at the same time.
 * @throws AppError 'not found' for a spent link, 'invalid' naming `password`.
 */
export async function acceptInvitation(input: AcceptInvitationBody, device: Device): Promise<StartedSession> {
  const seen = await findLink(await forkEm(), input.token)
  const name = input.name ?? seen.name ?? ''
  checkNewPassword(input.password, { email: seen.email ?? '', name })
  const passwordHash = await hashPassword(input.password)
  return inTransaction(async (em) => {
    const accountId = accountOf(await spendLink(em, input.token, 'invitation'))
    await storePassword(em, accountId, passwordHash)
    await queryRows(em, 'update accounts set name = ? where id = ?', [name, accountId])
    const started = await startSession(em, accountId, device)
    const actor = await readActorInTransaction(em, accountId, started.sessionId)
    await writeAuditEntry(
      em,
      actor,
      'account.invitation accepted',
      { type: 'account', id: accountId },
      {
        address: device.address,
      },
    )
    return started
  })
}

function accountOf(link: FoundLink): string {
  if (link.accountId === null) throw new Error('An invitation without an account')
  return link.accountId
}
