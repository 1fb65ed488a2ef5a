import type { FiringDto } from '@/lib/firings/schema'
import { classNames } from '@/components/ui/class-names'
import { firesideType } from './fireside-type'

/** Which hearth, which barrel; a touch opens what is seldom wanted. */
export function FiresideHead({
  firing,
  isTight,
  onMore,
}: {
  firing: Pick<FiringDto, 'hearthNumber' | 'piece' | 'recipe' | 'batch' | 'isTrial'>
  isTight: boolean
  onMore: () => void
}) {
  const { piece, recipe, batch } = firing
  return (
    <>
      <h1 className="sr-only">
        Hearth {firing.hearthNumber ?? 'none'}, {piece.kind} {piece.serial}
      </h1>
      <button
        type="button"
        onClick={onMore}
        aria-haspopup="dialog"
        className={classNames(
          'flex w-full items-center gap-6 border-b border-line px-6 text-left',
          isTight ? 'h-[100px]' : 'h-[116px]',
        )}
      >
        <span data-figure="hearth number" className={firesideType.numeral.className}>
          <span className="sr-only">Hearth </span>
          {firing.hearthNumber ?? '–'}
        </span>
        <span className="block min-w-0 flex-1 text-[21px] leading-[1.28]">
          <span className="flex justify-between gap-3">
            <span className="font-[640]">{piece.serial}</span>
            <span className="text-water">More</span>
          </span>
          <span className="block truncate text-soft">
            {recipe.name}, version {recipe.versionNumber}
          </span>
          <span className="block truncate text-soft">
            {firing.isTrial ? 'Trial, batch' : 'Batch'} {batch.number}, {piece.position} of {batch.pieceCount}
          </span>
        </span>
      </button>
    </>
  )
}
