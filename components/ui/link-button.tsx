import Link from 'next/link'
import type { ComponentProps } from 'react'
import { buttonClass } from './button-style'
import type { ButtonKind } from './button-style'

/** A link that looks like a button, for what leads to another page. */
export function LinkButton({
  kind = 'plain',
  className,
  ...rest
}: ComponentProps<typeof Link> & { kind?: ButtonKind }) {
  return <Link className={buttonClass(kind, className)} {...rest} />
}
