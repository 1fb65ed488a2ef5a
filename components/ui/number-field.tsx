'use client'

import { useState } from 'react'
import type { KeyboardEvent, ReactNode, Ref } from 'react'
import { parseDecimal } from '@/lib/format'
import type { FieldFrameProps } from './field'
import { TextField } from './text-field'

export type NumberFieldProps = FieldFrameProps & {
  /** The number now; null when there is none or what is typed is no number. */
  value?: number | null
  /** The number to begin with, when the form itself keeps the text. */
  defaultValue?: number | null
  /** Called with the number, or null, and the text as typed. */
  onValueChange?: (value: number | null, typed: string) => void
  onBlur?: () => void
  min?: number
  max?: number
  /** What the arrow keys add or take. */
  step?: number
  /** At most so many decimals are shown when the number comes from outside; typed ones are left alone. */
  decimals?: number
  /** Named in the field's own sentence ("Write minutes from 1 to 90."). Default "a number". */
  what?: string
  isRequired?: boolean
  disabled?: boolean
  readOnly?: boolean
  placeholder?: string
  inputRef?: Ref<HTMLInputElement>
  inputClassName?: string
}

/** A number as it would be typed: up to `decimals` decimals, no idle noughts, an ordinary minus. */
export function toTyped(value: number | null | undefined, decimals: number): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return ''
  return String(Number(value.toFixed(decimals)))
}

/**
 * A number. Keeps exactly what was typed, takes a decimal comma or point, and says in a sentence what would
 * do when the text is no number or out of bounds, once the field is left.
 */
export function NumberField({
  value,
  defaultValue,
  onValueChange,
  onBlur,
  min,
  max,
  step,
  decimals = 2,
  what = 'a number',
  isRequired = false,
  inputRef,
  error,
  ...rest
}: NumberFieldProps) {
  const [typed, setTyped] = useState(() => toTyped(value ?? defaultValue, decimals))
  const [isLeft, setIsLeft] = useState(false)
  const typedValue = parseDecimal(typed)
  const text = isSame(value, typedValue, decimals) ? typed : toTyped(value, decimals)
  const ownError = isLeft ? explainNumber(text, { min, max, what, isRequired }) : null

  function take(next: string) {
    setTyped(next)
    onValueChange?.(parseDecimal(next), next)
  }

  function stepByKey(event: KeyboardEvent<HTMLInputElement>) {
    if (step === undefined || (event.key !== 'ArrowUp' && event.key !== 'ArrowDown')) return
    event.preventDefault()
    const from = parseDecimal(text) ?? min ?? 0
    const moved = from + (event.key === 'ArrowUp' ? step : -step)
    const bounded = Math.min(Math.max(moved, min ?? -Infinity), max ?? Infinity)
    take(toTyped(bounded, Math.max(decimals, 2)))
  }

  return (
    <TextField
      {...rest}
      ref={inputRef}
      error={error ?? ownError ?? undefined}
      inputMode="decimal"
      autoComplete="off"
      value={text}
      onChange={(event) => take(event.target.value)}
      onKeyDown={stepByKey}
      onBlur={() => {
        setIsLeft(true)
        onBlur?.()
      }}
      inputClassName={`text-right ${rest.inputClassName ?? ''}`}
    />
  )
}

/** An uncontrolled field, or a value that agrees with the text, leaves the text as typed. */
function isSame(value: number | null | undefined, typedValue: number | null, decimals: number): boolean {
  if (value === undefined) return true
  if (value === null || typedValue === null) return value === typedValue
  return Math.abs(value - typedValue) <= 10 ** -(decimals + 4)
}

/** What is wrong with a typed number, as a sentence that says the fix, or null. */
export function explainNumber(
  typed: string,
  { min, max, what, isRequired }: { min?: number; max?: number; what: string; isRequired: boolean },
): ReactNode | null {
  const bounds = describeBounds(min, max)
  if (typed.trim() === '') return isRequired ? `Write ${what}${bounds}.` : null
  const value = parseDecimal(typed)
  if (value === null) return `Write ${what}${bounds}, in figures only.`
  if ((min !== undefined && value < min) || (max !== undefined && value > max))
    return `Write ${what}${bounds}.`
  return null
}

function describeBounds(min: number | undefined, max: number | undefined): string {
  if (min !== undefined && max !== undefined) return ` from ${toTyped(min, 2)} to ${toTyped(max, 2)}`
  if (min !== undefined) return ` of at least ${toTyped(min, 2)}`
  return max === undefined ? '' : ` of at most ${toTyped(max, 2)}`
}
