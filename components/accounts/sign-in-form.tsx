'use client'

import Link from 'next/link'
import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { TextField } from '@/components/ui/text-field'
import { useRequest } from '@/components/ui/use-request'
import { noteTouch } from '@/components/live/use-idle'
import { callApi } from '@/lib/http/api-client'

/** E-mail and password. A whole new page follows, so that nothing of a former person stays in the browser. */
export function SignInForm({ nextPath, knownEmail = '' }: { nextPath: string; knownEmail?: string }) {
  const [email, setEmail] = useState(knownEmail)
  const [password, setPassword] = useState('')
  const { isBusy, problem, send } = useRequest()

  async function signIn(event: FormEvent) {
    event.preventDefault()
    const isIn = await send(() => callApi('POST', '/api/session', { body: { email, password } }))
    if (!isIn) return
    noteTouch()
    window.location.assign(nextPath)
  }

  return (
    <form method="post" onSubmit={signIn} noValidate className="grid gap-4">
      <FormError problem={problem} labels={{ email: 'E-mail', password: 'Password' }} />
      <TextField
        name="email"
        type="email"
        label="E-mail"
        autoComplete="username"
        autoFocus={knownEmail === ''}
        value={email}
        onChange={(event) => setEmail(event.target.value)}
        error={problem?.fields?.email}
      />
      <TextField
        name="password"
        type="password"
        label="Password"
        autoComplete="current-password"
        value={password}
        onChange={(event) => setPassword(event.target.value)}
        error={problem?.fields?.password}
      />
      <div className="flex flex-wrap items-center justify-between gap-3">
        <Button type="submit" kind="due" isBusy={isBusy}>
          {isBusy ? 'Signing in' : 'Sign in'}
        </Button>
        <Link href="/forgot-password" className="link">
          Forgotten the password?
        </Link>
      </div>
    </form>
  )
}
