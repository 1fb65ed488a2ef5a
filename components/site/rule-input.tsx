'use client'

import { Checkbox } from '@/components/ui/checkbox'
import { NumberField } from '@/components/ui/number-field'
import { TemperatureField } from '@/components/ui/temperature-field'
import { unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { RuleField } from './rule-fields'

/** One rule; held in SI and °C, shown and typed as people say it. Null means that what is typed is no number. */
export function RuleInput({
  field,
  value,
  onValue,
  bounds,
  error,
  unit,
  isReadOnly,
}: {
  field: RuleField
  value: unknown
  onValue: (value: number | boolean | null) => void
  bounds: { min?: number; max?: number }
  error: string | undefined
  unit: TemperatureUnit
  isReadOnly: boolean
}) {
  const frame = { name: `rules.${field.path}`, label: field.label, hint: field.hint, error }
  if (field.kind === 'yes or no') {
    return (
      <Checkbox
        {...frame}
        checked={value === true}
        disabled={isReadOnly}
        onChange={(event) => onValue(event.target.checked)}
      />
    )
  }
  const number = typeof value === 'number' ? value : null
  const common = { ...frame, isRequired: true, readOnly: isReadOnly, decimals: field.decimals ?? 1 }
  if (field.kind !== 'number') {
    return (
      <TemperatureField
        {...common}
        kind={field.kind}
        {...(field.kind === 'difference' ? { what: `a difference in ${unitName(unit)}` } : {})}
        personUnit={unit}
        valueC={number}
        minC={bounds.min}
        maxC={bounds.max}
        onValueChangeC={onValue}
      />
    )
  }
  const scale = field.scale ?? 1
  const scaled = (of: number | undefined) => (of === undefined ? undefined : Number((of * scale).toFixed(9)))
  return (
    <NumberField
      {...common}
      unit={field.unit}
      value={number === null ? null : (scaled(number) ?? null)}
      min={scaled(bounds.min)}
      max={scaled(bounds.max)}
      onValueChange={(typed) => onValue(typed === null ? null : typed / scale)}
    />
  )
}
