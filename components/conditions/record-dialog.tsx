import type { FormEvent, ReactNode } from 'react'
import { Button } from '@/components/ui/button'
import { Dialog } from '@/components/ui/dialog'

/** The frame of a reading's form: its title, its fields, Cancel and Record. */
export function RecordDialog({
  title,
  formId,
  isBusy,
  onSave,
  onClose,
  children,
}: {
  title: string
  formId: string
  isBusy: boolean
  onSave: (event: FormEvent) => void
  onClose: () => void
  children: ReactNode
}) {
  return (
    <Dialog
      isOpen
      onClose={onClose}
      title={title}
      isBusy={isBusy}
      actions={
        <>
          <Button onClick={onClose} disabled={isBusy}>
            Cancel
          </Button>
          <Button kind="main" type="submit" form={formId} isBusy={isBusy}>
            {isBusy ? 'Recording' : 'Record'}
          </Button>
        </>
      }
    >
      <form id={formId} method="post" onSubmit={onSave} noValidate className="grid gap-3">
        {children}
      </form>
    </Dialog>
  )
}
