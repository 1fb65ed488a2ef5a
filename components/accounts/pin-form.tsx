'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'
import { FormError } from '@/components/ui/form-error'
import { TextField } from '@/components/ui/text-field'
import { Time } from '@/components/ui/time'
import { useToast } from '@/components/ui/toast'
import { useRequest } from '@/components/ui/use-request'
import type { PinDto } from '@/lib/accounts/schema'
import { callApi, tryApi } from '@/lib/http/api-client'

/** One's own PIN for shared tablets: set, changed by the password, removed. */
export function PinForm({ pin, timeZone }: { pin: PinDto; timeZone: string }) {
  const router = useRouter()
  const toast = useToast()
  const [password, setPassword] = useState('')
  const [figures, setFigures] = useState('')
  const [isRemoving, setIsRemoving] = useState(false)
  const { isBusy, problem, send } = useRequest()
  const isThere = pin.setAt !== null

  async function save(event: FormEvent) {
    event.preventDefault()
    const body = { password, pin: figures }
    if (!(await send(() => callApi('PUT', '/api/me/pin', { body })))) return
    setPassword('')
    setFigures('')
    toast({ words: 'Your PIN is set. What a former one opened has ended.' })
    router.refresh()
  }

  async function remove() {
    const answer = await tryApi('DELETE', '/api/me/pin')
    if (answer.problem !== null) return answer.problem
    setIsRemoving(false)
    toast({ words: 'You have no PIN any more.' })
    router.refresh()
    return null
  }

  return (
    <form method="post" onSubmit={save} noValidate className="grid content-start gap-4">
      <div>
        <h2>PIN for shared tablets</h2>
        <p className="mt-1 text-soft">
          It opens the fireside at an enrolled tablet, and nothing else. <State pin={pin} zone={timeZone} />
        </p>
      </div>
      <FormError problem={problem} labels={{ password: 'Your password', pin: 'PIN' }} />
      <TextField
        name="pinPassword"
        type="password"
        label="Your password"
        autoComplete="current-password"
        value={password}
        onChange={(event) => setPassword(event.target.value)}
        error={problem?.fields?.password}
      />
      <TextField
        name="pin"
        type="password"
        inputMode="numeric"
        label={isThere ? 'New PIN' : 'PIN'}
        hint="4 to 6 figures; none that only repeat or run up or down, and none that you had."
        autoComplete="off"
        maxLength={6}
        value={figures}
        onChange={(event) => setFigures(event.target.value)}
        error={problem?.fields?.pin}
      />
      <div className="flex flex-wrap gap-2">
        <Button type="submit" kind="main" isBusy={isBusy}>
          {isBusy ? 'Setting' : isThere ? 'Change the PIN' : 'Set the PIN'}
        </Button>
        {isThere ? <Button onClick={() => setIsRemoving(true)}>Remove it</Button> : null}
      </div>
      <ConfirmDialog
        isOpen={isRemoving}
        onClose={() => setIsRemoving(false)}
        title="Remove your PIN?"
        confirmLabel="Remove"
        isDanger
        onConfirm={remove}
      >
        Your name goes from the tablets, and where it is signed in now it is out. You can set another.
      </ConfirmDialog>
    </form>
  )
}

function State({ pin, zone }: { pin: PinDto; zone: string }) {
  if (pin.setAt === null) return <>You have none.</>
  if (pin.isLocked) {
    return (
      <span className="text-amber">
        It is locked after too many wrong tries. Signing in with your password opens it.
      </span>
    )
  }
  return (
    <>
      Set <Time at={pin.setAt} zone={zone} />.
    </>
  )
}
