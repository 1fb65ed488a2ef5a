'use client'

import Link from 'next/link'
import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { Notice } from '@/components/ui/notice'
import { TextField } from '@/components/ui/text-field'
import { useRequest } from '@/components/ui/use-request'
import { callApi } from '@/lib/http/api-client'

/** Asks for a link. What it says afterwards is the same whether the address has an account or not. */
export function ForgotPasswordForm() {
  const [email, setEmail] = useState('')
  const [isAsked, setIsAsked] = useState(false)
  const { isBusy, problem, send } = useRequest()

  async function ask(event: FormEvent) {
    event.preventDefault()
    setIsAsked(await send(() => callApi('POST', '/api/password-resets', { body: { email } })))
  }

  return (
    <form method="post" onSubmit={ask} noValidate className="grid gap-4">
      <FormError problem={problem} labels={{ email: 'E-mail' }} />
      {isAsked ? (
        <Notice>
          <p role="status">
            If {email} has an account here, a mail with a link is on its way. The link serves once, for an
            hour. Nothing there after some minutes? Look among the unwanted mail, then ask your administrator.
          </p>
        </Notice>
      ) : null}
      <TextField
        name="email"
        type="email"
        label="E-mail"
        autoComplete="username"
        value={email}
        onChange={(event) => {
          setEmail(event.target.value)
          setIsAsked(false)
        }}
        error={problem?.fields?.email}
      />
      <div className="flex flex-wrap items-center justify-between gap-3">
        <Button type="submit" kind={isAsked ? 'plain' : 'due'} isBusy={isBusy}>
          {isBusy ? 'Asking' : isAsked ? 'Ask again' : 'Send me a link'}
        </Button>
        <Link href="/sign-in" className="link">
          Back to sign-in
        </Link>
      </div>
    </form>
  )
}
