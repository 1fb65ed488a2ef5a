'use client'

import { useState } from 'react'
import { Checkbox } from '@/components/ui/checkbox'
import { TextField } from '@/components/ui/text-field'

/** A password to choose: shown on wish, which serves better than writing it twice, and free to be pasted. */
export function NewPasswordField({
  name,
  label,
  value,
  onValue,
  error,
}: {
  name: string
  label: string
  value: string
  onValue: (value: string) => void
  error?: string | undefined
}) {
  const [isShown, setIsShown] = useState(false)
  return (
    <div>
      <TextField
        name={name}
        type={isShown ? 'text' : 'password'}
        label={label}
        hint="At least 12 characters, better 15 or more: four words that do not belong together serve well. Capitals, figures and signs are not needed."
        autoComplete="new-password"
        spellCheck={false}
        value={value}
        onChange={(event) => onValue(event.target.value)}
        error={error}
      />
      <Checkbox
        name={`${name}-shown`}
        label="Show it"
        checked={isShown}
        onChange={(event) => setIsShown(event.target.checked)}
      />
    </div>
  )
}
