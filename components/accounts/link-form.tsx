'use client'

import Link from 'next/link'
import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { Notice } from '@/components/ui/notice'
import { TextField } from '@/components/ui/text-field'
import { useRequest } from '@/components/ui/use-request'
import type { LinkDto } from '@/lib/accounts/schema'
import { callApi } from '@/lib/http/api-client'
import { NewPasswordField } from './new-password-field'
import { useLink } from './use-link'

type Purpose = LinkDto['purpose']

const words: Record<Purpose, { title: string; intro: string; button: string }> = {
  invitation: {
    title: 'Welcome',
    intro: 'Look whether your name is right, it goes into signatures, and choose a password.',
    button: 'Set the password and begin',
  },
  'first administrator': {
    title: 'The first administrator',
    intro: 'Nobody has an account here yet. Yours will be able to invite the others.',
    button: 'Make my account',
  },
  'password reset': {
    title: 'Choose a new password',
    intro: 'Every open session of yours ends with it, on all devices.',
    button: 'Set the new password',
  },
}

/** What a one-time link opens: a password to choose, and a name or e-mail where they are not known yet. */
export function LinkForm() {
  const state = useLink()
  if (state.kind === 'reading') return <p role="status">Reading the link …</p>
  if (state.kind === 'spent') {
    return (
      <>
        <h1>This link does not serve</h1>
        <Notice tone="attention" className="mt-3">
          {state.detail}
        </Notice>
        <p className="mt-4 flex gap-5">
          <Link href="/sign-in" className="link">
            Sign in
          </Link>
          <Link href="/forgot-password" className="link">
            Ask for a new password
          </Link>
        </p>
      </>
    )
  }
  return <OpenLinkForm token={state.token} link={state.link} />
}

function OpenLinkForm({ token, link }: { token: string; link: LinkDto }) {
  const [name, setName] = useState(link.name ?? '')
  const [email, setEmail] = useState(link.email ?? '')
  const [password, setPassword] = useState('')
  const { isBusy, problem, send } = useRequest()
  const { title, intro, button } = words[link.purpose]

  async function submit(event: FormEvent) {
    event.preventDefault()
    const isDone = await send(() => spend(link.purpose, { token, name, email, password }))
    if (isDone) window.location.assign(link.purpose === 'password reset' ? '/sign-in?changed' : '/')
  }

  return (
    <form method="post" onSubmit={submit} noValidate className="grid gap-4">
      <div>
        <h1>{title}</h1>
        <p className="mt-2 text-soft">{intro}</p>
      </div>
      <FormError problem={problem} labels={{ name: 'Name', email: 'E-mail', password: 'Password' }} />
      <TextField
        name="email"
        type="email"
        label="E-mail"
        autoComplete="username"
        readOnly={link.email !== null}
        value={email}
        onChange={(event) => setEmail(event.target.value)}
        error={problem?.fields?.email}
      />
      {link.purpose === 'password reset' ? null : (
        <TextField
          name="name"
          label="Name"
          autoComplete="name"
          value={name}
          onChange={(event) => setName(event.target.value)}
          error={problem?.fields?.name}
        />
      )}
      <NewPasswordField
        name="password"
        label="New password"
        value={password}
        onValue={setPassword}
        error={problem?.fields?.password}
      />
      <div>
        <Button type="submit" kind="due" isBusy={isBusy}>
          {isBusy ? 'Working' : button}
        </Button>
      </div>
    </form>
  )
}

async function spend(
  purpose: Purpose,
  { token, name, email, password }: { token: string; name: string; email: string; password: string },
): Promise<unknown> {
  if (purpose === 'invitation') {
    return callApi('POST', '/api/invitations/accept', { body: { token, name, password } })
  }
  if (purpose === 'password reset') {
    return callApi('POST', '/api/password-resets/complete', { body: { token, password } })
  }
  return callApi('POST', '/api/first-administrator', { body: { token, name, email, password } })
}
