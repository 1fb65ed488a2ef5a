import type { EntityManager } from '@mikro-orm/postgresql'
import type { IssuedLink } from '@/lib/accounts/account-links'
import type { AccountDto, InvitationDto } from '@/lib/accounts/schema'
import type { Actor } from '@/lib/auth/actor'
import { formatInstant } from '@/lib/format'
import { sendMail } from '@/lib/mail/send-mail'
import { invitationMail } from '@/lib/mail/templates'
import { currentSite } from '@/lib/site/current-site'

/**
 * Mails an invitation, after its account is committed. When no mail can go, the link is answered instead, to be
 * handed over another way: the account is never lost.
 */
export async function sendInvitation(
  em: EntityManager,
  actor: Actor,
  account: AccountDto,
  link: IssuedLink,
): Promise<InvitationDto> {
  const site = await currentSite(em)
  const mail = invitationMail({
    siteName: site.name,
    personName: account.name,
    inviterName: actor.name,
    roleName: account.role,
    link: link.url,
    until: formatInstant(link.expiresAt, site.timeZone),
  })
  const { isSent } = await sendMail({ to: account.email, ...mail })
  return { account, isMailSent: isSent, link: isSent ? null : link.url }
}
