'use client'

import { usePathname, useRouter } from 'next/navigation'
import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { NumberField } from '@/components/ui/number-field'

/** "vanillin:2.1,eugenol:0.4" by key. */
function readLot(lot: string): Record<string, number | null> {
  return Object.fromEntries(
    lot.split(',').flatMap((part) => {
      const [key, value] = part.split(':')
      return key === undefined || value === undefined ? [] : [[key, Number(value)]]
    }),
  )
}

/** What formulas ask of a wood lot before the fire: given by hand, kept in the address, stored nowhere. */
export function LotAssays({
  assays,
  lot,
}: {
  assays: readonly { key: string; name: string; unit: string }[]
  lot: string
}) {
  const router = useRouter()
  const pathname = usePathname()
  const [values, setValues] = useState(() => readLot(lot))

  function submit(event: FormEvent) {
    event.preventDefault()
    const given = assays.flatMap(({ key }) => {
      const value = values[key] ?? null
      return value === null || value < 0 ? [] : [`${key}:${value}`]
    })
    // Replaced, not gone to: what is typed into the bench above stays.
    router.replace(given.length === 0 ? pathname : `${pathname}?lot=${encodeURIComponent(given.join(','))}`, {
      scroll: false,
    })
  }

  return (
    <form method="post" onSubmit={submit} noValidate className="mb-3 flex flex-wrap items-end gap-3">
      {assays.map(({ key, name, unit }) => (
        <NumberField
          key={key}
          name={`lot.${key}`}
          label={`${name} of the lot before the fire`}
          unit={unit}
          min={0}
          what="the assay"
          className="w-56"
          value={values[key] ?? null}
          decimals={4}
          onValueChange={(value) => setValues((now) => ({ ...now, [key]: value }))}
        />
      ))}
      <Button type="submit">Predict with these</Button>
    </form>
  )
}
