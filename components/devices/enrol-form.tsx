'use client'

import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { TextField } from '@/components/ui/text-field'
import { useRequest } from '@/components/ui/use-request'
import type { EnrolledDeviceDto } from '@/lib/devices/schema'
import { callApi } from '@/lib/http/api-client'

/** The code that an administrator made, typed at the tablet. */
export function EnrolForm() {
  const [code, setCode] = useState('')
  const { isBusy, problem, send } = useRequest()

  async function enrol(event: FormEvent) {
    event.preventDefault()
    await send(async () => {
      const device = await callApi<EnrolledDeviceDto>('POST', '/api/devices/enrol', { body: { code } })
      window.location.assign(device.kind === 'wall screen' ? '/room/wall' : '/who')
    })
  }

  return (
    <form method="post" onSubmit={enrol} noValidate className="grid gap-4">
      <FormError problem={problem} labels={{ code: 'Code' }} />
      <TextField
        name="code"
        label="Code"
        hint="12 letters and figures, such as K7QW-3M9X-TR4H; small letters will do."
        autoComplete="off"
        autoCapitalize="characters"
        spellCheck={false}
        autoFocus
        inputClassName="font-mono text-title! tracking-wider uppercase"
        value={code}
        onChange={(event) => setCode(event.target.value)}
        error={problem?.fields?.code}
      />
      <div>
        <Button type="submit" kind="due" isBusy={isBusy}>
          {isBusy ? 'Enrolling' : 'Enrol this device'}
        </Button>
      </div>
    </form>
  )
}
