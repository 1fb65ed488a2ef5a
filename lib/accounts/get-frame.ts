import { readMe } from '@/lib/accounts/get-me'
import type { PersonActor } from '@/lib/auth/actor'
import { forkEm } from '@/lib/db/orm'
import { currentSite } from '@/lib/site/current-site'

export type FrameDto = {
  person: { name: string; roleName: string; accountHref: string }
  /** For a customer's person. */
  customer: { name: string; siteName: string } | null
}

/** What stands around a person's pages. */
export async function getFrame(actor: PersonActor): Promise<FrameDto> {
  const em = await forkEm()
  const me = await readMe(em, actor.accountId)
  const person = { name: me.name, roleName: me.role, accountHref: '/account' }
  if (me.customer === null) return { person, customer: null }
  return { person, customer: { name: me.customer.name, siteName: (await currentSite(em)).name } }
}
