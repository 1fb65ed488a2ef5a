'use client'

import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { Dialog } from '@/components/ui/dialog'
import { FormError } from '@/components/ui/form-error'
import { useRequest } from '@/components/ui/use-request'
import type { LossDraft } from './loss-draft'
import { draftFaults } from './loss-draft'
import { LossFields, lossLabels } from './loss-fields'

/** A loss at the desk: noted, or put right. */
export function LossDialog({
  start,
  canBreak,
  onNote,
  onClose,
}: {
  start: LossDraft
  canBreak: boolean
  onNote: (draft: LossDraft) => Promise<void>
  onClose: () => void
}) {
  const [draft, setDraft] = useState(start)
  const [isAsked, setIsAsked] = useState(false)
  const { isBusy, problem, send } = useRequest()
  const faults = draftFaults(draft)
  const save = async (event: FormEvent) => {
    event.preventDefault()
    setIsAsked(true)
    if (Object.keys(faults).length > 0) return
    if (await send(() => onNote(draft))) onClose()
  }
  const title = draft.replacesId === null ? 'Note a loss' : 'Put this loss right'
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
          <Button kind="main" type="submit" form="loss-form" isBusy={isBusy}>
            {isBusy ? 'Saving' : draft.replacesId === null ? 'Note it' : 'Put right'}
          </Button>
        </>
      }
    >
      <form id="loss-form" method="post" onSubmit={(event) => void save(event)} noValidate>
        <FormError problem={problem} labels={lossLabels} />
        {draft.replacesId === null ? null : (
          <p className="mb-3 text-soft">What was noted before stays, struck through, beside this one.</p>
        )}
        <LossFields
          draft={draft}
          onChange={setDraft}
          fields={{ ...(isAsked ? faults : {}), ...problem?.fields }}
          canBreak={canBreak}
        />
      </form>
    </Dialog>
  )
}
