import type { Metadata } from 'next'
import { PasswordForm } from '@/components/accounts/password-form'
import { PinForm } from '@/components/accounts/pin-form'
import { PreferencesForm } from '@/components/accounts/preferences-form'
import { SessionList } from '@/components/accounts/session-list'
import { Facts } from '@/components/ui/facts'
import { PageHead } from '@/components/ui/page-head'
import { getMe } from '@/lib/accounts/get-me'
import { getOwnPin } from '@/lib/accounts/get-own-pin'
import { listSessions } from '@/lib/accounts/list-sessions'
import { requirePageActor } from '@/lib/auth/page-actor'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Account' }

export default async function AccountPage() {
  const actor = await requirePageActor()
  const reads = [getMe(actor), listSessions(actor), currentSite(), getOwnPin(actor)] as const
  const [me, sessions, site, pin] = await Promise.all(reads)
  const facts = [
    { name: 'E-mail', value: me.email },
    { name: 'Role', value: me.role },
    ...(me.customer === null ? [] : [{ name: 'Customer', value: me.customer.name }]),
  ]
  return (
    <>
      <PageHead title="Account" sub="Yours alone; only an administrator changes e-mail and role." />
      <Facts facts={facts} />
      <div className="mt-7 grid max-w-[60rem] gap-x-12 gap-y-8 md:grid-cols-2">
        <PreferencesForm me={me} />
        <PasswordForm email={me.email} />
        {pin === null ? null : <PinForm pin={pin} timeZone={site.timeZone} />}
      </div>
      <SessionList sessions={sessions.items} timeZone={site.timeZone} />
    </>
  )
}
