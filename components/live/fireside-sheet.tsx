'use client'

import { useId } from 'react'
import type { ReactNode } from 'react'
import { useModal } from '@/components/ui/use-modal'
import { classNames } from '@/components/ui/class-names'

/** A large dialog for gloves: most of the screen, its own scrolling, closed by Escape or its last button. */
export function FiresideSheet({
  title,
  onClose,
  isWide = false,
  children,
}: {
  title: string
  /** Two columns of fields: nearly the whole width, so that nothing scrolls. */
  isWide?: boolean
  onClose: () => void
  children: ReactNode
}) {
  const dialog = useModal(true)
  const titleId = useId()
  return (
    <dialog
      ref={dialog}
      aria-labelledby={titleId}
      className={classNames(
        'm-auto max-h-[98dvh] overflow-y-auto rounded-control border border-line bg-raised p-6 text-text shadow-float',
        isWide ? 'w-[min(1220px,calc(100vw-32px))]' : 'w-[min(880px,calc(100vw-32px))]',
      )}
      onCancel={(event) => {
        event.preventDefault()
        onClose()
      }}
    >
      <h2 id={titleId} className="text-title font-[640]">
        {title}
      </h2>
      <div className="mt-4">{children}</div>
    </dialog>
  )
}
