import type { ComponentProps } from 'react'
import { buttonClass } from './button-style'
import type { ButtonKind } from './button-style'

export type ButtonProps = ComponentProps<'button'> & {
  kind?: ButtonKind
  /** While true the button is busy: it says so, keeps its width and takes no second press. */
  isBusy?: boolean
}

/** A button. `type` is "button" unless given, so that it never submits a form by accident. */
export function Button({
  kind = 'plain',
  isBusy = false,
  type = 'button',
  className,
  children,
  onClick,
  ...rest
}: ButtonProps) {
  return (
    <button
      type={type}
      className={buttonClass(kind, className)}
      aria-busy={isBusy || undefined}
      aria-disabled={isBusy || undefined}
      onClick={isBusy ? (event) => event.preventDefault() : onClick}
      {...rest}
    >
      {children}
    </button>
  )
}
