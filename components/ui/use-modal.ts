'use client'

import { useEffect, useRef } from 'react'
import type { RefObject } from 'react'

/** Shows a dialog element as the browser's own modal while it is open, and gives the focus back when it closes. */
export function useModal(isOpen: boolean): RefObject<HTMLDialogElement | null> {
  const dialog = useRef<HTMLDialogElement>(null)
  useEffect(() => {
    const element = dialog.current
    if (element === null || !isOpen) return
    const opener = document.activeElement
    element.showModal()
    return () => {
      element.close()
      if (opener instanceof HTMLElement && opener.isConnected) opener.focus()
    }
  }, [isOpen])
  return dialog
}
