import type { Metadata } from 'next'
import { ForgotPasswordForm } from '@/components/accounts/forgot-password-form'
import { PlainShell } from '@/components/shell/plain-shell'

export const metadata: Metadata = { title: 'Forgotten password' }

export default function ForgotPasswordPage() {
  return (
    <PlainShell>
      <h1>Choose a new password</h1>
      <p className="mt-2 mb-5 text-soft">We mail you a link; the password that you have stays until then.</p>
      <ForgotPasswordForm />
    </PlainShell>
  )
}
