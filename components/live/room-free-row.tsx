import Link from 'next/link'
import { classNames } from '@/components/ui/class-names'
import type { PieceDto } from '@/lib/batches/schema'
import type { RoomSize } from './room-size'
import { startHref } from './room-scan'
import { roomNumeral } from './room-size'

/** A hearth with nothing over its fire: what comes next, and one touch to begin. */
export function RoomFreeRow({
  hearthNumber,
  next,
  canFire,
  isScanned = false,
  size,
}: {
  hearthNumber: number
  /** The next rose of the queue, or null when nothing waits. */
  next: PieceDto | null
  canFire: boolean
  /** `next` was scanned here, and goes to the hearth that is touched. */
  isScanned?: boolean
  size: RoomSize
}) {
  return (
    <div
      className={classNames(
        'grid min-h-0 items-center border-b border-line px-6',
        size.isWall ? 'grid-cols-[150px_minmax(0,1fr)]' : 'min-[1100px]:grid-cols-[168px_minmax(0,1fr)_auto]',
      )}
    >
      <p className={roomNumeral(size).className}>
        <span className="sr-only">Hearth </span>
        {hearthNumber}
      </p>
      <p className={size.isWall ? 'text-[38px] leading-[1.15]' : 'text-[30px] leading-[1.2]'}>
        {freeWords(next)}
      </p>
      {canFire && !size.isWall ? (
        <Link
          href={startHref(hearthNumber, isScanned ? (next?.serial ?? null) : null)}
          className="flex min-h-[85px] items-center px-6 text-[30px] font-[640] text-water active:bg-wash"
        >
          {next === null ? 'Fire one again' : 'Start preheat'}
        </Link>
      ) : null}
    </div>
  )
}

function freeWords(next: PieceDto | null): string {
  if (next === null) return 'Free. Nothing waits in the queue.'
  const what = next.kind === 'head' ? 'Next head' : 'Next rose'
  return `Free. ${what} ${next.serial}, ${next.recipe.name}, version ${next.recipe.versionNumber}`
}
