import type { Metadata } from 'next'
import { redirect } from 'next/navigation'
import { SignInView } from '@/components/accounts/sign-in-view'
import { PlainShell } from '@/components/shell/plain-shell'
import { getWelcome } from '@/lib/accounts/get-welcome'
import { pageActor, pageDevice } from '@/lib/auth/page-actor'
import { safeNextPath } from '@/lib/http/next-path'
import type { SearchParams } from '@/lib/http/page-query'

export const metadata: Metadata = { title: 'Sign in' }

export default async function SignInPage({ searchParams }: { searchParams: SearchParams }) {
  const { next, changed } = await searchParams
  const nextPath = safeNextPath(typeof next === 'string' ? next : null)
  const [actor, device, welcome] = await Promise.all([pageActor(), pageDevice(), getWelcome()])
  // Who is in by PIN may want what the password opens.
  if (actor !== null && actor.byPinAt === undefined) redirect(nextPath)
  return (
    <PlainShell>
      <SignInView
        welcome={welcome}
        nextPath={nextPath}
        isPasswordNew={changed !== undefined}
        deviceName={device === null || device.place === 'wall screen' ? null : device.name}
      />
    </PlainShell>
  )
}
