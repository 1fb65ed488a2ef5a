import { findLink } from '@/lib/accounts/account-links'
import type { InspectLinkBody, LinkDto } from '@/lib/accounts/schema'
import { forkEm } from '@/lib/db/orm'

/** What a link is for, so that the page can greet its person before anything is typed. The token is the authority. */
export async function inspectLink(input: InspectLinkBody): Promise<LinkDto> {
  const link = await findLink(await forkEm(), input.token)
  return {
    purpose: link.purpose,
    email: link.email,
    name: link.name,
    expiresAt: link.expiresAt.toISOString(),
  }
}
