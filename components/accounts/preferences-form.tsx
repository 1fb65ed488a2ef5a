'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { TextField } from '@/components/ui/text-field'
import { useToast } from '@/components/ui/toast'
import { useRequest } from '@/components/ui/use-request'
import type { MeDto } from '@/lib/accounts/schema'
import { callApi } from '@/lib/http/api-client'

/** One's name and unit of temperature. */
export function PreferencesForm({ me }: { me: MeDto }) {
  const router = useRouter()
  const toast = useToast()
  const [name, setName] = useState(me.name)
  const [unit, setUnit] = useState(me.temperatureUnit)
  const { isBusy, problem, send } = useRequest()

  async function save(event: FormEvent) {
    event.preventDefault()
    const isSaved = await send(() => callApi('PUT', '/api/me', { body: { name, temperatureUnit: unit } }))
    if (!isSaved) return
    toast({ words: 'Saved.' })
    router.refresh()
  }

  return (
    <form method="post" onSubmit={save} noValidate className="grid content-start gap-4">
      <h2>Name and units</h2>
      <FormError problem={problem} labels={{ name: 'Name' }} />
      <TextField
        name="name"
        label="Name"
        hint="As it stands on signatures from now on; those made before keep the name they were made with."
        autoComplete="name"
        value={name}
        onChange={(event) => setName(event.target.value)}
        error={problem?.fields?.name}
      />
      <fieldset>
        <legend className="mb-1 text-small font-[560]">Temperatures in</legend>
        <div className="flex gap-6">
          {(['C', 'F'] as const).map((choice) => (
            <label key={choice} className="flex items-center gap-2 py-1">
              <input
                type="radio"
                name="temperatureUnit"
                className="size-[17px] accent-water"
                checked={unit === choice}
                onChange={() => setUnit(choice)}
              />
              °{choice}
            </label>
          ))}
        </div>
      </fieldset>
      <div>
        <Button type="submit" kind="main" isBusy={isBusy}>
          {isBusy ? 'Saving' : 'Save'}
        </Button>
      </div>
    </form>
  )
}
