import type { ComponentProps } from 'react'
import { classNames } from './class-names'
import { Field, inputClass } from './field'
import type { FieldFrameProps } from './field'

export type TextFieldProps = FieldFrameProps &
  Omit<ComponentProps<'input'>, keyof FieldFrameProps> & { inputClassName?: string }

/** One line of text; also e-mail, password, search and date by `type`. */
export function TextField({
  name,
  label,
  hint,
  error,
  unit,
  isOptional,
  isLabelHidden,
  id,
  className,
  inputClassName,
  type = 'text',
  ...input
}: TextFieldProps) {
  const frame = { name, label, hint, error, unit, isOptional, isLabelHidden, id, className }
  return (
    <Field {...frame}>
      {(wiring) => (
        <input
          type={type}
          required={input.required}
          {...input}
          {...wiring}
          className={classNames(inputClass, inputClassName)}
        />
      )}
    </Field>
  )
}
