'use client'

import { useId } from 'react'
import { useModal } from './use-modal'
import type { ReactNode } from 'react'

export type DialogProps = {
  isOpen: boolean
  /** Called for Escape, a press outside and Cancel alike. */
  onClose: () => void
  title: ReactNode
  children: ReactNode
  /** The buttons, main action last. */
  actions?: ReactNode
  /** While true (a request is under way) the dialog does not close. */
  isBusy?: boolean
  /** A press outside closes it; off where something typed would be lost. */
  closesOnOutsidePress?: boolean
}

/** The browser's own modal dialog: it holds the focus, gives it back on closing, and closes on Escape. */
export function Dialog({
  isOpen,
  onClose,
  title,
  children,
  actions,
  isBusy = false,
  closesOnOutsidePress = false,
}: DialogProps) {
  const dialog = useModal(isOpen)
  const titleId = useId()

  if (!isOpen) return null
  return (
    <dialog
      ref={dialog}
      aria-labelledby={titleId}
      className="m-auto max-h-[90dvh] w-[min(34rem,calc(100vw-32px))] overflow-y-auto rounded-control border border-line bg-raised p-0 text-text shadow-float"
      onCancel={(event) => {
        event.preventDefault()
        if (!isBusy) onClose()
      }}
      onMouseDown={(event) => {
        if (closesOnOutsidePress && !isBusy && event.target === event.currentTarget) onClose()
      }}
    >
      <div className="p-6">
        <h2 id={titleId} className="text-large font-[640]">
          {title}
        </h2>
        <div className="mt-2">{children}</div>
        {actions === undefined ? null : (
          <div className="mt-5 flex flex-wrap justify-end gap-2">{actions}</div>
        )}
      </div>
    </dialog>
  )
}
