import type { ComponentProps } from 'react'
import { classNames } from './class-names'
import { Field, inputClass } from './field'
import type { FieldFrameProps } from './field'

export type TextAreaProps = FieldFrameProps & Omit<ComponentProps<'textarea'>, keyof FieldFrameProps>

/** Several lines of text. */
export function TextArea({
  name,
  label,
  hint,
  error,
  unit,
  isOptional,
  isLabelHidden,
  id,
  className,
  rows = 4,
  ...input
}: TextAreaProps) {
  const frame = { name, label, hint, error, unit, isOptional, isLabelHidden, id, className }
  return (
    <Field {...frame}>
      {(wiring) => (
        <textarea rows={rows} {...input} {...wiring} className={classNames(inputClass, 'resize-y')} />
      )}
    </Field>
  )
}
