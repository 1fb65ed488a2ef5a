import type { ReactNode } from 'react'
import type { LossDto } from '@/lib/barrels/schema'
import { formatInstant } from '@/lib/format'
import { lossWords } from './loss-words'

/** Losses, a line each; one that does not stand any more is struck through and says what came of it. */
export function LossLines({
  losses,
  zone,
  firingId,
  actions,
}: {
  losses: readonly LossDto[]
  zone: string
  /** The firing whose page this is; what came at another time says when. */
  firingId: string | null
  actions?: (loss: LossDto) => ReactNode
}) {
  return (
    <ul>
      {losses.map((loss) => (
        <li
          key={loss.id}
          className="flex flex-wrap items-baseline justify-between gap-x-4 border-b border-line py-[5.5px]"
        >
          <div className="min-w-0 flex-1 basis-60">
            {loss.ended === null ? lossWords(loss) : <del className="text-mute">{lossWords(loss)}</del>}
            {loss.words === '' ? null : <span className="text-soft"> {loss.words}</span>}
            <span className="block text-small text-soft">
              Lot {loss.woodLot}, {loss.by}, {formatInstant(loss.at, zone)}
              {loss.firingId === firingId
                ? ''
                : loss.firingId === null
                  ? ', outside a firing'
                  : ', in another firing'}
              {loss.ended === null ? null : `. ${endedWords(loss.ended)}`}
            </span>
          </div>
          {loss.ended === null ? actions?.(loss) : null}
        </li>
      ))}
    </ul>
  )
}

function endedWords({ by, reason }: NonNullable<LossDto['ended']>): string {
  return reason === null ? `Put right by ${by}` : `Taken back by ${by}: ${reason}`
}
