import type { Metadata } from 'next'
import { LinkForm } from '@/components/accounts/link-form'
import { PlainShell } from '@/components/shell/plain-shell'

export const metadata: Metadata = { title: 'New password' }

export default function ResetPasswordPage() {
  return (
    <PlainShell>
      <LinkForm />
    </PlainShell>
  )
}
