'use client'

import { fromShownDifference, fromShownTemp, toShownDifference, toShownTemp, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { NumberField } from './number-field'
import type { NumberFieldProps } from './number-field'

export type TemperatureFieldProps = Omit<
  NumberFieldProps,
  'value' | 'defaultValue' | 'onValueChange' | 'min' | 'max' | 'unit'
> & {
  /** The person's unit; what comes in and goes out stays °C. */
  personUnit: TemperatureUnit
  /** A difference (band, spread) or a rate a minute is converted without the 32. */
  kind?: 'temperature' | 'difference' | 'rate'
  valueC?: number | null
  defaultValueC?: number | null
  onValueChangeC?: (valueC: number | null, typed: string) => void
  minC?: number
  maxC?: number
  /** The unit is not shown beside the field, as in a table whose column head says it. */
  isUnitHidden?: boolean
}

/** A temperature, a difference or a climb rate: held in °C, shown and typed in the person's unit. */
export function TemperatureField({
  personUnit,
  kind = 'temperature',
  valueC,
  defaultValueC,
  onValueChangeC,
  minC,
  maxC,
  isUnitHidden = false,
  decimals = 1,
  what,
  ...rest
}: TemperatureFieldProps) {
  const toShown = kind === 'temperature' ? toShownTemp : toShownDifference
  const fromShown = kind === 'temperature' ? fromShownTemp : fromShownDifference
  const shown = (celsius: number | null | undefined) =>
    celsius === null || celsius === undefined ? celsius : Number(toShown(celsius, personUnit).toFixed(6))
  return (
    <NumberField
      key={personUnit}
      {...rest}
      unit={isUnitHidden ? undefined : `${unitName(personUnit)}${kind === 'rate' ? ' a minute' : ''}`}
      what={
        what ??
        (kind === 'temperature' ? `a temperature in ${unitName(personUnit)}` : `${unitName(personUnit)}`)
      }
      decimals={decimals}
      value={shown(valueC)}
      defaultValue={shown(defaultValueC)}
      min={shown(minC) ?? undefined}
      max={shown(maxC) ?? undefined}
      onValueChange={(value, typed) =>
        onValueChangeC?.(value === null ? null : fromShown(value, personUnit), typed)
      }
    />
  )
}
