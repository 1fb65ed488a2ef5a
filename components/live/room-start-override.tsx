'use client'

import { TextField } from '@/components/ui/text-field'

type Override = { password: string; reason: string }

/** A check is out of date: the start needs a signature and its reason, which are kept with the firing. */
export function RoomStartOverride({
  value,
  onValue,
  fields,
}: {
  value: Override
  onValue: (value: Override) => void
  fields: Readonly<Record<string, string>>
}) {
  return (
    <div className="mb-3 grid gap-3">
      <TextField
        name="override.reason"
        label="Why it starts all the same"
        maxLength={1000}
        autoComplete="off"
        value={value.reason}
        onChange={(event) => onValue({ ...value, reason: event.target.value })}
        error={fields['override.reason']}
      />
      <TextField
        name="override.password"
        label="Your password, again: it signs the override"
        type="password"
        autoComplete="current-password"
        value={value.password}
        onChange={(event) => onValue({ ...value, password: event.target.value })}
        error={fields['override.password'] ?? fields['password']}
      />
    </div>
  )
}
