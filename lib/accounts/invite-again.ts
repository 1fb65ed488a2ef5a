import { issueLink } from '@/lib/accounts/account-links'
import { lockAccount, readAccount } from '@/lib/accounts/read-account'
import type { InvitationDto } from '@/lib/accounts/schema'
import { sendInvitation } from '@/lib/accounts/send-invitation'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'

/** Mails a new link to an invited person; the older one ends. @throws AppError 'conflict' when no longer invited. */
export async function inviteAgain(actor: Actor, id: string): Promise<InvitationDto> {
  requirePermission(actor, 'accounts:write')
  const { account, link } = await inTransaction(async (em) => {
    const before = await lockAccount(em, id)
    if (before.state !== 'invited') {
      throw new AppError(
        'conflict',
        before.state === 'active'
          ? `${before.name} has chosen a password already. A forgotten one is renewed from the sign-in page.`
          : `The account of ${before.name} is closed. Open it again first.`,
      )
    }
    const issued = await issueLink(em, 'invitation', id)
    await writeAuditEntry(
      em,
      actor,
      'account.invited again',
      { type: 'account', id },
      { email: before.email },
    )
    return { account: await readAccount(em, id), link: issued }
  })
  return sendInvitation(await forkEm(), actor, account, link)
}
