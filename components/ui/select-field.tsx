import type { ComponentProps } from 'react'
import { classNames } from './class-names'
import { Field, inputClass } from './field'
import type { FieldFrameProps } from './field'

export type SelectOption = { value: string; label: string; isDisabled?: boolean }

export type SelectFieldProps = FieldFrameProps &
  Omit<ComponentProps<'select'>, keyof FieldFrameProps | 'children'> & {
    options: readonly SelectOption[]
    /** A first line of empty value that says what to choose ("Choose a hearth"). */
    placeholder?: string
  }

/** A choice from a list, by the browser's own select. */
export function SelectField({
  name,
  label,
  hint,
  error,
  unit,
  isOptional,
  isLabelHidden,
  id,
  className,
  options,
  placeholder,
  ...select
}: SelectFieldProps) {
  const frame = { name, label, hint, error, unit, isOptional, isLabelHidden, id, className }
  return (
    <Field {...frame}>
      {(wiring) => (
        <select {...select} {...wiring} className={classNames(inputClass, 'pr-7')}>
          {placeholder === undefined ? null : <option value="">{placeholder}</option>}
          {options.map((option) => (
            <option key={option.value} value={option.value} disabled={option.isDisabled}>
              {option.label}
            </option>
          ))}
        </select>
      )}
    </Field>
  )
}
