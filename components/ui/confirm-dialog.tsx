'use client'

import { useState } from 'react'
import type { FormEvent, ReactNode } from 'react'
import { Button } from './button'
import { Dialog } from './dialog'
import { FormError } from './form-error'
import type { Problem } from './problem'
import { TextArea } from './text-area'

export type ConfirmDialogProps = {
  isOpen: boolean
  onClose: () => void
  /** A question that names the thing: "Withdraw version 4?" */
  title: ReactNode
  /** What will happen, and whether it can be undone. */
  children: ReactNode
  /** The verb, never "OK": "Withdraw". */
  confirmLabel: string
  isDanger?: boolean
  /** Ask for a reason; its label. The reason is trimmed and never empty. */
  reasonLabel?: string
  /** Does it. Answers a problem to show, or null when done (the caller then closes). */
  onConfirm: (reason: string) => Promise<Problem | null>
}

/** Asks before something that hurts. */
export function ConfirmDialog(props: ConfirmDialogProps) {
  return props.isOpen ? <OpenConfirmDialog {...props} /> : null
}

function OpenConfirmDialog({
  onClose,
  title,
  children,
  confirmLabel,
  isDanger = false,
  reasonLabel,
  onConfirm,
}: ConfirmDialogProps) {
  const [reason, setReason] = useState('')
  const [reasonError, setReasonError] = useState<string>()
  const [problem, setProblem] = useState<Problem | null>(null)
  const [isBusy, setIsBusy] = useState(false)

  async function confirm(event: FormEvent) {
    event.preventDefault()
    const trimmed = reason.trim()
    if (reasonLabel !== undefined && trimmed === '') {
      setReasonError('Write a reason; it goes into the audit trail.')
      return
    }
    setIsBusy(true)
    setProblem(await onConfirm(trimmed))
    setIsBusy(false)
  }

  return (
    <Dialog isOpen onClose={onClose} title={title} isBusy={isBusy}>
      <form method="post" onSubmit={confirm} noValidate>
        <FormError problem={problem} />
        <div>{children}</div>
        {reasonLabel === undefined ? null : (
          <TextArea
            name="reason"
            id="confirm-reason"
            className="mt-3"
            label={reasonLabel}
            rows={3}
            maxLength={2000}
            value={reason}
            onChange={(event) => {
              setReason(event.target.value)
              setReasonError(undefined)
            }}
            error={problem?.fields?.reason ?? reasonError}
          />
        )}
        <div className="mt-5 flex flex-wrap justify-end gap-2">
          <Button onClick={onClose} disabled={isBusy}>
            Cancel
          </Button>
          <Button type="submit" kind={isDanger ? 'danger' : 'due'} isBusy={isBusy}>
            {isBusy ? 'Working' : confirmLabel}
          </Button>
        </div>
      </form>
    </Dialog>
  )
}
