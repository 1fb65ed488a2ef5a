import type { ReactNode } from 'react'
import { classNames } from './class-names'

/** A sentence that stands in place: a caution, a warning, a remark. Colour only for what is abnormal. */
export function Notice({
  tone = 'plain',
  children,
  className,
}: {
  tone?: 'plain' | 'attention' | 'wrong'
  children: ReactNode
  className?: string
}) {
  const edges = { plain: 'border-line', attention: 'border-amber', wrong: 'border-red' } as const
  return <div className={classNames('border-l-4 py-[2px] pl-3', edges[tone], className)}>{children}</div>
}
