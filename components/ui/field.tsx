import type { ReactNode } from 'react'
import { classNames } from './class-names'
import { fieldId } from './field-id'

export type FieldFrameProps = {
  /** The field's path in the form, as an AppError names it ("stages.0.minutes"). */
  name: string
  label: ReactNode
  /** What to write, before anything is wrong. */
  hint?: ReactNode
  /** What is wrong and how to mend it; stands under the field, which keeps what was typed. */
  error?: ReactNode
  /** The unit, after the input. */
  unit?: ReactNode
  isOptional?: boolean
  /** The label is read out but not shown, as in a table whose column head says it. */
  isLabelHidden?: boolean
  /** Only where one page has two fields of one name. */
  id?: string
  className?: string
}

export type FieldWiring = {
  id: string
  name: string
  'aria-describedby': string | undefined
  'aria-invalid': true | undefined
}

/** The attributes that tie an input to its label, hint, unit and error. */
export function wireField({ name, id, hint, error, unit }: FieldFrameProps): FieldWiring {
  const inputId = id ?? fieldId(name)
  const describedBy = [
    isShown(unit) ? `${inputId}-unit` : '',
    isShown(hint) ? `${inputId}-hint` : '',
    isShown(error) ? `${inputId}-error` : '',
  ].filter((part) => part !== '')
  return {
    id: inputId,
    name,
    'aria-describedby': describedBy.length === 0 ? undefined : describedBy.join(' '),
    'aria-invalid': isShown(error) ? true : undefined,
  }
}

function isShown(part: ReactNode): boolean {
  return part !== undefined && part !== null && part !== false && part !== ''
}

/** Label above, input and unit, hint, error under it. `children` is given the wiring. */
export function Field({
  children,
  ...frame
}: FieldFrameProps & { children: (wiring: FieldWiring) => ReactNode }) {
  const wiring = wireField(frame)
  const { label, hint, error, unit, isOptional, isLabelHidden, className } = frame
  return (
    <div className={classNames('min-w-0', className)}>
      <label htmlFor={wiring.id} className={isLabelHidden ? 'sr-only' : 'mb-1 block text-small font-[560]'}>
        {label}
        {isOptional ? <span className="font-normal text-soft"> (optional)</span> : null}
      </label>
      <div className="flex items-center gap-2">
        {children(wiring)}
        {isShown(unit) ? (
          <span id={`${wiring.id}-unit`} className="shrink-0 text-soft">
            {unit}
          </span>
        ) : null}
      </div>
      {isShown(hint) ? (
        <p id={`${wiring.id}-hint`} className="mt-1 text-small text-soft">
          {hint}
        </p>
      ) : null}
      {isShown(error) ? (
        <p id={`${wiring.id}-error`} className="mt-1 text-small font-[560] text-red">
          {error}
        </p>
      ) : null}
    </div>
  )
}

export const inputClass = 'control w-full min-w-0 px-[10px] py-[6px]'
