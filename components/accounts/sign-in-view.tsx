import Link from 'next/link'
import { Notice } from '@/components/ui/notice'
import type { WelcomeDto } from '@/lib/accounts/get-welcome'
import { SignInForm } from './sign-in-form'

/** Signing in by password, with what the page may tell anybody. */
export function SignInView({
  welcome,
  nextPath,
  isPasswordNew,
  deviceName,
}: {
  welcome: WelcomeDto
  nextPath: string
  /** A new password was just set. */
  isPasswordNew: boolean
  /** Of an enrolled tablet, where a PIN does as well; else null. */
  deviceName: string | null
}) {
  return (
    <>
      <h1 className="mb-1">Sign in</h1>
      {welcome.siteName === null ? null : <p className="mb-5 text-soft">{welcome.siteName}</p>}
      {isPasswordNew ? <Notice className="mb-4">Your new password is set. Sign in with it.</Notice> : null}
      {welcome.hasAccounts ? null : (
        <Notice tone="attention" className="mb-4">
          Nobody has an account here yet. The first administrator is made by the link that the server printed
          when it started.
        </Notice>
      )}
      <SignInForm nextPath={nextPath} />
      {deviceName === null ? null : (
        <p className="mt-6 text-small text-soft">
          This is {deviceName}.{' '}
          <Link href="/who" className="link">
            Choose your name and type your PIN
          </Link>{' '}
          instead.
        </p>
      )}
      {welcome.isDemo ? (
        <p className="mt-6 text-small text-soft">
          This is a demonstration with invented people and firings. Its sign-ins stand where you started it,
          and in the README.
        </p>
      ) : null}
    </>
  )
}
