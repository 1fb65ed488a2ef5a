'use client'

import { useState } from 'react'
import type { KeyboardEvent } from 'react'
import { classNames } from '@/components/ui/class-names'
import { fieldId } from '@/components/ui/field-id'
import { toTyped } from '@/components/ui/number-field'
import {
  fromShownDifference,
  fromShownTemp,
  parseDecimal,
  toShownDifference,
  toShownTemp,
  unitName,
} from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

export type Quantity = 'number' | 'temperature' | 'difference'

export type NumberCellProps = {
  /** The field's path, as an error names it. */
  name: string
  /** Read out; the row or column shows it. */
  label: string
  /** As stored: °C, min, mm. */
  value: number | null
  onChange: (value: number | null) => void
  quantity?: Quantity
  unit: TemperatureUnit
  decimals?: number
  error?: string | undefined
  className?: string
  /** Within a line of words: as wide as what is typed, and standing left. */
  isInline?: boolean
  disabled?: boolean
  onKeyDown?: (event: KeyboardEvent<HTMLInputElement>) => void
  onFocus?: () => void
  onBlur?: () => void
}

export const cellClass =
  'min-h-[30px] min-w-0 rounded-control border border-transparent bg-transparent px-[5px] py-[2px] hover:border-line ' +
  'focus:border-water focus:bg-raised aria-invalid:border-red disabled:text-mute disabled:hover:border-transparent'

function toShown(value: number, quantity: Quantity, unit: TemperatureUnit): number {
  if (quantity === 'temperature') return toShownTemp(value, unit)
  return quantity === 'difference' ? toShownDifference(value, unit) : value
}

function fromShown(value: number, quantity: Quantity, unit: TemperatureUnit): number {
  if (quantity === 'temperature') return fromShownTemp(value, unit)
  return quantity === 'difference' ? fromShownDifference(value, unit) : value
}

/** Wide enough for the text, its padding and one more figure. */
export function inlineWidth(text: string): { width: string } {
  return { width: `calc(${Math.max(text.length, 2)}ch + 18px)` }
}

/** What a typed cell stands for, as stored; null when it is no number. */
export function readCell(typed: string, quantity: Quantity, unit: TemperatureUnit): number | null {
  const value = parseDecimal(typed)
  return value === null ? null : fromShown(value, quantity, unit)
}

/** A number in a table or a line of words: quiet until pointed at, keeps exactly what was typed. */
export function NumberCell(props: NumberCellProps) {
  const { name, label, value, onChange, quantity = 'number', unit, decimals = 1, error, className } = props
  const show = (shown: number | null) =>
    shown === null ? '' : toTyped(toShown(shown, quantity, unit), decimals)
  const [typed, setTyped] = useState(() => show(value))
  const typedValue = readCell(typed, quantity, unit)
  const isAsTyped =
    value === null || typedValue === null ? value === typedValue : Math.abs(value - typedValue) < 1e-9
  const text = isAsTyped ? typed : show(value)
  const unitWords = quantity === 'number' ? '' : `, ${unitName(unit)}`

  return (
    <input
      id={fieldId(name)}
      name={name}
      aria-label={`${label}${unitWords}`}
      aria-invalid={error === undefined ? undefined : true}
      aria-describedby={error === undefined ? undefined : `${fieldId(name)}-error`}
      inputMode="decimal"
      autoComplete="off"
      disabled={props.disabled}
      className={classNames(cellClass, props.isInline ? 'text-left' : 'text-right', className)}
      style={props.isInline ? inlineWidth(text) : undefined}
      value={text}
      onChange={(event) => {
        setTyped(event.target.value)
        onChange(readCell(event.target.value, quantity, unit))
      }}
      onKeyDown={props.onKeyDown}
      onFocus={(event) => {
        event.target.select()
        props.onFocus?.()
      }}
      onBlur={props.onBlur}
    />
  )
}

/** What is wrong, under the cell that it is about. */
export function CellError({ name, error }: { name: string; error: string | undefined }) {
  if (error === undefined) return null
  return (
    <p id={`${fieldId(name)}-error`} className="text-small font-[560] text-red">
      {error}
    </p>
  )
}
