'use client'

import Link from 'next/link'
import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'
import type { LossDto } from '@/lib/barrels/schema'
import { problemOf } from '@/lib/http/api-client'
import { LossDialog } from './loss-dialog'
import type { LossDraft } from './loss-draft'
import { draftOfLoss, newLossDraft } from './loss-draft'
import { LossLines } from './loss-lines'
import { lossWords } from './loss-words'
import { useLosses } from './use-losses'

/** The losses of a piece, with stave position and lot: noted, put right, taken back, and never forgotten. */
export function LossList({
  pieceId,
  firingId,
  woodLot,
  known,
  mayChange,
  canBreak,
  zone,
}: {
  pieceId: string
  /** A loss that is noted here is of this firing; null outside one. */
  firingId: string | null
  woodLot: string
  known: readonly LossDto[]
  mayChange: boolean
  canBreak: boolean
  zone: string
}) {
  const { losses, note, takeBack } = useLosses(pieceId, known)
  const [draft, setDraft] = useState<LossDraft | null>(null)
  const [doubted, setDoubted] = useState<LossDto | null>(null)
  const all = losses ?? []
  const begin = () =>
    setDraft(newLossDraft({ firingId, woodLot, kind: firingId === null ? 'leak' : 'blister' }))
  return (
    <section>
      <h2 className="mb-1">
        Losses
        {firingId === null ? null : (
          <Link
            href={`/barrels/${pieceId}`}
            className="ml-3 font-normal text-soft underline-offset-3 hover:underline"
          >
            all of this piece
          </Link>
        )}
      </h2>
      <div className="border-t border-line">
        {all.length === 0 ? (
          <p className="border-b border-line py-2 text-soft">
            None: nothing broke at the pull, no blister, no leak, no stave replaced.
          </p>
        ) : (
          <LossLines
            losses={all}
            zone={zone}
            firingId={firingId}
            actions={(loss) =>
              mayChange ? (
                <span className="flex gap-3 no-print">
                  <Button kind="quiet" onClick={() => setDraft(draftOfLoss(loss))}>
                    Put right<span className="sr-only">: {lossWords(loss)}</span>
                  </Button>
                  <Button kind="quiet" onClick={() => setDoubted(loss)}>
                    Take back<span className="sr-only">: {lossWords(loss)}</span>
                  </Button>
                </span>
              ) : null
            }
          />
        )}
      </div>
      {mayChange ? (
        <Button className="mt-3 no-print" onClick={begin}>
          Note a loss
        </Button>
      ) : null}
      {draft === null ? null : (
        <LossDialog
          key={draft.id}
          start={draft}
          canBreak={canBreak}
          onNote={note}
          onClose={() => setDraft(null)}
        />
      )}
      <ConfirmDialog
        isOpen={doubted !== null}
        onClose={() => setDoubted(null)}
        title="Take this loss back?"
        confirmLabel="Take back"
        isDanger
        reasonLabel="Why"
        onConfirm={async (reason) => {
          if (doubted === null) return null
          try {
            await takeBack(doubted.id, reason)
            setDoubted(null)
            return null
          } catch (error) {
            return problemOf(error)
          }
        }}
      >
        {doubted === null ? '' : lossWords(doubted)} It stays here, struck through, with your reason.
      </ConfirmDialog>
    </section>
  )
}
