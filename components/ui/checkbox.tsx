import type { ComponentProps } from 'react'
import { classNames } from './class-names'
import { wireField } from './field'
import type { FieldFrameProps } from './field'

export type CheckboxProps = Omit<FieldFrameProps, 'unit' | 'isOptional' | 'isLabelHidden'> &
  Omit<ComponentProps<'input'>, keyof FieldFrameProps | 'type'>

/** A box to tick, its words to the right. */
export function Checkbox({ name, label, hint, error, id, className, ...input }: CheckboxProps) {
  const wiring = wireField({ name, label, hint, error, id })
  return (
    <div className={classNames('min-w-0', className)}>
      <label htmlFor={wiring.id} className="flex cursor-pointer items-start gap-2 py-1">
        <input
          {...input}
          {...wiring}
          type="checkbox"
          className="mt-[3px] size-[17px] shrink-0 accent-water"
        />
        <span>{label}</span>
      </label>
      {hint === undefined ? null : (
        <p id={`${wiring.id}-hint`} className="ml-[25px] text-small text-soft">
          {hint}
        </p>
      )}
      {error === undefined || error === '' || error === null ? null : (
        <p id={`${wiring.id}-error`} className="ml-[25px] text-small font-[560] text-red">
          {error}
        </p>
      )}
    </div>
  )
}
