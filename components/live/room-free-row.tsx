import Link from 'next/link'
import { classNames } from '@/components/ui/class-names'
import type { PieceDto } from '@/lib/batches/schema'
import { roomType } from './fireside-type'

/** A hearth with nothing over its fire: what comes next, and one touch to begin. */
export function RoomFreeRow({
  hearthNumber,
  next,
  canFire,
  isTight,
}: {
  hearthNumber: number
  /** The next rose of the queue, or null when nothing waits. */
  next: PieceDto | null
  canFire: boolean
  isTight: boolean
}) {
  return (
    <div className="grid min-h-0 grid-cols-[176px_minmax(0,1fr)_auto] items-center border-b border-line px-6">
      <p className={isTight ? roomType.numeralTight.className : roomType.numeral.className}>
        <span className="sr-only">Hearth </span>
        {hearthNumber}
      </p>
      <p className="text-[30px] leading-[1.2]">
        {next === null
          ? 'Free. No rose waits in the queue.'
          : `Free. Next rose ${next.serial}, ${next.recipe.name}, version ${next.recipe.versionNumber}`}
      </p>
      {next !== null && canFire ? (
        <Link
          href={`/room/start?hearth=${hearthNumber}`}
          className={classNames(
            'flex min-h-[85px] items-center px-6 text-[30px] font-[640] text-water active:bg-wash',
          )}
        >
          Start preheat
        </Link>
      ) : null}
    </div>
  )
}
