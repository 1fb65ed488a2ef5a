'use client'

import { useEffect, useId, useRef } from 'react'
import type { ReactNode } from 'react'

/** A large dialog for gloves: most of the screen, its own scrolling, closed by Escape or its last button. */
export function FiresideSheet({
  title,
  onClose,
  children,
}: {
  title: string
  onClose: () => void
  children: ReactNode
}) {
  const dialog = useRef<HTMLDialogElement>(null)
  const titleId = useId()
  useEffect(() => {
    const element = dialog.current
    if (element === null) return
    const opener = document.activeElement
    element.showModal()
    return () => {
      element.close()
      if (opener instanceof HTMLElement && opener.isConnected) opener.focus()
    }
  }, [])
  return (
    <dialog
      ref={dialog}
      aria-labelledby={titleId}
      className="m-auto max-h-[96dvh] w-[min(880px,calc(100vw-32px))] overflow-y-auto rounded-control border border-line bg-raised p-6 text-text shadow-float"
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
