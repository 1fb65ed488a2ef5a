'use client'

import { useState } from 'react'
import type { FormEvent } from 'react'
import type { LossDraft } from '@/components/losses/loss-draft'
import { draftFaults, newLossDraft } from '@/components/losses/loss-draft'
import { LossFields, lossLabels } from '@/components/losses/loss-fields'
import { lossWords } from '@/components/losses/loss-words'
import type { Losses } from '@/components/losses/use-losses'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { useRequest } from '@/components/ui/use-request'
import type { LossKind } from '@/lib/barrels/loss-kinds'
import { FiresideSheet } from './fireside-sheet'

export type LossPlace = { firingId: string; woodLot: string; canBreak: boolean; likely: LossKind }

/** A loss by stave, noted with a glove. What was typed stays until it is taken. */
export function FiresideLossSheet({
  place,
  losses,
  onClose,
}: {
  place: LossPlace
  losses: Losses
  onClose: () => void
}) {
  const [draft, setDraft] = useState<LossDraft>(() =>
    newLossDraft({ firingId: place.firingId, woodLot: place.woodLot, kind: place.likely }),
  )
  const [isAsked, setIsAsked] = useState(false)
  const { isBusy, problem, send } = useRequest()
  const faults = draftFaults(draft)
  const save = async (event: FormEvent) => {
    event.preventDefault()
    setIsAsked(true)
    if (Object.keys(faults).length > 0) return
    if (await send(() => losses.note(draft))) onClose()
  }
  return (
    <FiresideSheet title="Note a loss" isWide onClose={onClose}>
      <form method="post" onSubmit={(event) => void save(event)} noValidate>
        <FormError problem={problem} labels={lossLabels} />
        <LossFields
          draft={draft}
          onChange={setDraft}
          fields={{ ...(isAsked ? faults : {}), ...problem?.fields }}
          canBreak={place.canBreak}
        />
        <div className="mt-5 flex justify-end gap-3">
          <Button onClick={onClose} disabled={isBusy}>
            Not now
          </Button>
          <Button kind="due" type="submit" isBusy={isBusy}>
            {isBusy ? 'Noting' : 'Note the loss'}
          </Button>
        </div>
      </form>
    </FiresideSheet>
  )
}

/** The losses of this firing so far, in a line each, and the way to note one. */
export function FiresideLosses({
  losses,
  firingId,
  onNote,
}: {
  losses: Losses
  firingId: string
  onNote: () => void
}) {
  const own = (losses.losses ?? []).filter((loss) => loss.ended === null && loss.firingId === firingId)
  return (
    <div className="flex flex-wrap items-center gap-3">
      <Button onClick={onNote}>Note a loss</Button>
      <ul className="min-w-0 flex-1">
        {own.slice(-3).map((loss) => (
          <li key={loss.id}>{lossWords(loss)}</li>
        ))}
        {own.length > 3 ? <li className="text-soft">and {own.length - 3} before</li> : null}
      </ul>
    </div>
  )
}
