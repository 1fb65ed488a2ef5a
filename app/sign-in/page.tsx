import type { Metadata } from 'next'
import { redirect } from 'next/navigation'
import { SignInForm } from '@/components/accounts/sign-in-form'
import { PlainShell } from '@/components/shell/plain-shell'
import { Notice } from '@/components/ui/notice'
import { getWelcome } from '@/lib/accounts/get-welcome'
import { pageActor } from '@/lib/auth/page-actor'
import { safeNextPath } from '@/lib/http/next-path'
import type { SearchParams } from '@/lib/http/page-query'

export const metadata: Metadata = { title: 'Sign in' }

export default async function SignInPage({ searchParams }: { searchParams: SearchParams }) {
  const { next, changed } = await searchParams
  const nextPath = safeNextPath(typeof next === 'string' ? next : null)
  if ((await pageActor()) !== null) redirect(nextPath)
  const welcome = await getWelcome()
  return (
    <PlainShell>
      <h1 className="mb-1">Sign in</h1>
      {welcome.siteName === null ? null : <p className="mb-5 text-soft">{welcome.siteName}</p>}
      {changed === undefined ? null : (
        <Notice className="mb-4">Your new password is set. Sign in with it.</Notice>
      )}
      {welcome.hasAccounts ? null : (
        <Notice tone="attention" className="mb-4">
          Nobody has an account here yet. The first administrator is made by the link that the server printed
          when it started.
        </Notice>
      )}
      <SignInForm nextPath={nextPath} />
      {welcome.isDemo ? (
        <p className="mt-6 text-small text-soft">
          This is a demonstration with invented people and firings. Its sign-ins stand where you started it,
          and in the README.
        </p>
      ) : null}
    </PlainShell>
  )
}
