import Link from 'next/link'
import { buttonClass } from '@/components/ui/button-style'
import { formatInstant } from '@/lib/format'
import type { FiringDto } from '@/lib/firings/schema'
import { firesideType } from './fireside-type'

/** In the fireside's place when the firing is over, or has not begun. */
export function FiresideEnded({
  firing,
  zone,
  isDeskOpen = true,
}: {
  firing: FiringDto
  zone: string
  /** False where a PIN does not open the firing’s page. */
  isDeskOpen?: boolean
}) {
  const when = firing.endedAt === null ? '' : ` at ${formatInstant(firing.endedAt, zone, 'time')}`
  const words = firing.state === 'queued' ? 'waits in the queue' : `${firing.state}${when}`
  return (
    <div className="px-6 py-8">
      <h1 className={firesideType.action.className}>
        {firing.piece.serial} {words}.
      </h1>
      {firing.endReason === null ? null : <p className="mt-4 text-large text-soft">{firing.endReason}</p>}
      <div className="mt-8 flex flex-wrap gap-3">
        {firing.state === 'queued' || !isDeskOpen ? null : (
          <Link href={`/firings/${firing.id}`} className={buttonClass('due')}>
            Open the firing’s page
          </Link>
        )}
        <Link href="/room" className={buttonClass('plain')}>
          Back to the room
        </Link>
      </div>
    </div>
  )
}
