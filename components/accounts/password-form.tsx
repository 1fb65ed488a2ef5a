'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { TextField } from '@/components/ui/text-field'
import { useToast } from '@/components/ui/toast'
import { useRequest } from '@/components/ui/use-request'
import { callApi } from '@/lib/http/api-client'
import { NewPasswordField } from './new-password-field'

/** Changes one's own password by the present one. */
export function PasswordForm({ email }: { email: string }) {
  const router = useRouter()
  const toast = useToast()
  const [currentPassword, setCurrentPassword] = useState('')
  const [newPassword, setNewPassword] = useState('')
  const { isBusy, problem, send } = useRequest()

  async function change(event: FormEvent) {
    event.preventDefault()
    const body = { currentPassword, newPassword }
    if (!(await send(() => callApi('PUT', '/api/me/password', { body })))) return
    setCurrentPassword('')
    setNewPassword('')
    toast({ words: 'Password changed. Your other sessions have ended.' })
    router.refresh()
  }

  return (
    <form method="post" onSubmit={change} noValidate className="grid content-start gap-4">
      <h2>Password</h2>
      <FormError
        problem={problem}
        labels={{ currentPassword: 'Present password', newPassword: 'New password' }}
      />
      {/* For password managers, which otherwise cannot tell whose password this is. */}
      <input type="email" name="username" autoComplete="username" value={email} readOnly hidden />
      <TextField
        name="currentPassword"
        type="password"
        label="Present password"
        autoComplete="current-password"
        value={currentPassword}
        onChange={(event) => setCurrentPassword(event.target.value)}
        error={problem?.fields?.currentPassword}
      />
      <NewPasswordField
        name="newPassword"
        label="New password"
        value={newPassword}
        onValue={setNewPassword}
        error={problem?.fields?.newPassword}
      />
      <div>
        <Button type="submit" kind="main" isBusy={isBusy}>
          {isBusy ? 'Changing' : 'Change the password'}
        </Button>
      </div>
    </form>
  )
}
