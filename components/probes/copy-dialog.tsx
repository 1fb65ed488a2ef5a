'use client'

import type { ReactNode } from 'react'
import { Button } from '@/components/ui/button'
import { Dialog } from '@/components/ui/dialog'
import { TextField } from '@/components/ui/text-field'
import { useToast } from '@/components/ui/toast'

/** Something that is shown this once, to be copied: a device token, a code. */
export function CopyDialog({
  title,
  label,
  secret,
  isLarge = false,
  onClose,
  children,
}: {
  title: string
  label: string
  secret: string
  /** A code that is typed from the screen by hand. */
  isLarge?: boolean
  onClose: () => void
  children: ReactNode
}) {
  const toast = useToast()

  async function copy() {
    try {
      await navigator.clipboard.writeText(secret)
      toast({ words: `${label} copied.` })
    } catch {
      toast({ words: 'The browser would not copy. Select it and copy it by hand.', isWrong: true })
    }
  }

  return (
    <Dialog
      isOpen
      onClose={onClose}
      title={title}
      actions={
        <>
          <Button onClick={() => void copy()}>Copy</Button>
          <Button kind="due" onClick={onClose}>
            Done
          </Button>
        </>
      }
    >
      {children}
      <TextField
        name="secret"
        label={label}
        className="mt-3"
        inputClassName={isLarge ? 'font-mono text-title! tracking-wider' : 'font-mono'}
        readOnly
        value={secret}
        onFocus={(event) => event.target.select()}
      />
    </Dialog>
  )
}
