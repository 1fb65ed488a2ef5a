'use client'

import type { ReactNode } from 'react'
import { classNames } from '@/components/ui/class-names'
import { fieldId } from '@/components/ui/field-id'
import { CellError, cellClass, inlineWidth } from './number-cell'

/** One line of the bench's left column: a name, then quiet inputs within words, errors under them. */
export function InlineRow({
  name,
  children,
  errors,
}: {
  name: string
  children: ReactNode
  /** Field path → sentence, for the fields in this line. */
  errors: readonly { name: string; error: string | undefined }[]
}) {
  return (
    <div className="grid grid-cols-[11rem_1fr] items-baseline gap-x-2">
      <span className="text-soft">{name}</span>
      <div className="min-w-0">
        <div className="flex flex-wrap items-baseline gap-x-1">{children}</div>
        {errors.map((one) => (
          <CellError key={one.name} {...one} />
        ))}
      </div>
    </div>
  )
}

/** A short text within a line of words. */
export function InlineText({
  name,
  label,
  value,
  onChange,
  onBlur,
  error,
}: {
  name: string
  label: string
  value: string
  onChange: (value: string) => void
  onBlur?: () => void
  error?: string | undefined
}) {
  return (
    <input
      id={fieldId(name)}
      name={name}
      aria-label={label}
      aria-invalid={error === undefined ? undefined : true}
      aria-describedby={error === undefined ? undefined : `${fieldId(name)}-error`}
      autoComplete="off"
      className={cellClass}
      style={inlineWidth(value)}
      value={value}
      onChange={(event) => onChange(event.target.value)}
      onBlur={onBlur}
    />
  )
}

/** A choice within a line of words. `choices` is the closed list that the schema knows. */
export function InlineChoice<Choice extends string>({
  name,
  label,
  value,
  choices,
  onChange,
}: {
  name: string
  label: string
  value: Choice
  choices: readonly Choice[]
  onChange: (value: Choice) => void
}) {
  return (
    <select
      id={fieldId(name)}
      name={name}
      aria-label={label}
      className={classNames(cellClass, 'cursor-pointer')}
      value={value}
      onChange={(event) => {
        const chosen = choices.find((choice) => choice === event.target.value)
        if (chosen !== undefined) onChange(chosen)
      }}
    >
      {choices.map((choice) => (
        <option key={choice} value={choice}>
          {choice}
        </option>
      ))}
    </select>
  )
}
