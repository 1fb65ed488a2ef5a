'use client'

import { Button } from '@/components/ui/button'
import { formatPercent } from '@/lib/format'
import type { PhotoUnderWay } from './use-photos'

/** A picture that goes, with how much of it has gone; or that did not, with why and what to do. */
export function PhotoUnderWayTile({
  photo,
  onAgain,
  onDrop,
  heightPx,
}: {
  photo: PhotoUnderWay
  onAgain: () => void
  onDrop: () => void
  heightPx: number
}) {
  return (
    <div className="flex min-w-0 items-start gap-3">
      {/* An address of this page alone, which no optimiser can reach. */}
      <img
        src={photo.href}
        alt="The photo just taken"
        className="rounded-control border border-line object-cover opacity-70"
        style={{ height: heightPx, width: heightPx }}
      />
      <div className="max-w-[22rem] min-w-0">
        {photo.refusal === null ? (
          <p role="status" className="text-soft">
            {photo.share >= 1 ? 'Being kept' : `Sending, ${formatPercent(photo.share)}`}
          </p>
        ) : (
          <>
            <p role="alert" className="font-[560] text-red">
              {photo.refusal}
            </p>
            <div className="mt-1 flex gap-3">
              <Button kind="quiet" onClick={onAgain}>
                Send again
              </Button>
              <Button kind="quiet" onClick={onDrop}>
                Drop it
              </Button>
            </div>
          </>
        )}
      </div>
    </div>
  )
}
