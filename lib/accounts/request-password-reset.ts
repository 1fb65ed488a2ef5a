import { issueLink } from '@/lib/accounts/account-links'
import type { RequestResetBody } from '@/lib/accounts/schema'
import type { Device } from '@/lib/accounts/sessions'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import { systemActor } from '@/lib/auth/actor'
import { countResetRequest } from '@/lib/auth/throttle'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { formatInstant } from '@/lib/format'
import { inBackground } from '@/lib/mail/in-background'
import { sendMail } from '@/lib/mail/send-mail'
import { passwordResetMail } from '@/lib/mail/templates'
import { currentSite } from '@/lib/site/current-site'

/**
 * Mails a link to choose a new password, if the address has an active account. Whether it has is found out after the
 * answer is given, so that neither the answer nor its time tells.
 * @throws AppError 'too many' after 3 an hour for one e-mail or 20 from one address, known or not.
 */
export async function requestPasswordReset(input: RequestResetBody, device: Device): Promise<void> {
  await countResetRequest(input.email, device.address)
  inBackground('a password reset', () => sendReset(input.email, device))
}

async function sendReset(email: string, device: Device): Promise<void> {
  const sending = await inTransaction(async (em) => {
    const [account] = await queryRows<{ id: string; email: string; name: string }>(
      em,
      `select id, email, name from accounts where lower(email) = lower(?) and state = 'active'`,
      [email],
    )
    if (account === undefined) return null
    const link = await issueLink(em, 'password reset', account.id)
    const site = await currentSite(em)
    await writeAuditEntry(
      em,
      systemActor('password reset'),
      'account.password reset asked',
      { type: 'account', id: account.id },
      { address: device.address },
    )
    return { account, link, site }
  })
  if (sending === null) return
  const { account, link, site } = sending
  const until = formatInstant(link.expiresAt, site.timeZone)
  const mail = passwordResetMail({ siteName: site.name, personName: account.name, link: link.url, until })
  await sendMail({ to: account.email, ...mail })
}
