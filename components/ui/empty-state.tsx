import type { ReactNode } from 'react'

/** An empty place: what is not here, what to do about it, and the control that does it. */
export function EmptyState({
  title,
  children,
  action,
}: {
  title: string
  children?: ReactNode
  action?: ReactNode
}) {
  return (
    <div className="border-y border-line py-6">
      <p className="font-[640]">{title}</p>
      {children === undefined ? null : <div className="mt-1 max-w-[60ch] text-soft">{children}</div>}
      {action === undefined ? null : <div className="mt-3 flex flex-wrap gap-2">{action}</div>}
    </div>
  )
}
