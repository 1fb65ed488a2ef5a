import { classNames } from '@/components/ui/class-names'
import { TextField } from '@/components/ui/text-field'
import type { PieceDto } from '@/lib/batches/schema'

/** The queue in its order: the next rose first, others by touch, by search or by scanning the route card. */
export function RoomStartPieces({
  pieces,
  isSearching,
  search,
  onSearch,
  chosen,
  onChoose,
}: {
  pieces: readonly PieceDto[]
  isSearching: boolean
  search: string
  onSearch: (search: string) => void
  chosen: PieceDto | null
  onChoose: (piece: PieceDto) => void
}) {
  return (
    <fieldset className="mt-3 flex min-h-0 flex-1 flex-col">
      <legend className="sr-only">Barrel</legend>
      <TextField
        name="q"
        type="search"
        label="Barrel: the next rose, or find another by serial, recipe or lot"
        autoComplete="off"
        value={search}
        onChange={(event) => onSearch(event.target.value)}
        onKeyDown={(event) => {
          // A scanner ends with Enter: the barrel it named is chosen, and the form is not sent.
          if (event.key !== 'Enter') return
          event.preventDefault()
          const [only] = pieces
          if (only !== undefined) onChoose(only)
        }}
      />
      <div className="mt-2 max-h-[270px] min-h-[90px] flex-1 overflow-y-auto border-y border-line">
        {pieces.map((piece) => (
          <label
            key={piece.id}
            className={classNames(
              'flex min-h-[85px] cursor-pointer items-center gap-4 border-b border-line px-2 last:border-b-0',
              chosen?.id === piece.id && 'bg-raised',
            )}
          >
            <input
              type="radio"
              name="pieceId"
              checked={chosen?.id === piece.id}
              onChange={() => onChoose(piece)}
              className="size-[36px] shrink-0 accent-water"
            />
            <span className="min-w-0 text-[22px] leading-[1.2]">
              <span className="block font-[640]">
                {piece.serial}{' '}
                <span className="font-normal">
                  {piece.recipe.name}, version {piece.recipe.versionNumber}
                </span>
              </span>
              <span className="block truncate text-[18px] text-soft">
                Batch {piece.batch.number}, {piece.position} of {piece.batch.pieceCount};{' '}
                {piece.customer.name}; lot {piece.batch.woodLot}
              </span>
            </span>
          </label>
        ))}
        {pieces.length === 0 ? (
          <p className="px-2 py-4 text-soft">{emptyWords(isSearching, search)}</p>
        ) : null}
      </div>
    </fieldset>
  )
}

function emptyWords(isSearching: boolean, search: string): string {
  if (isSearching) return 'Looking.'
  if (search.trim() === '') return 'No rose waits. A master cooper plans a batch on the page Batches.'
  return `No waiting rose matches “${search.trim()}”. Clear the search to see the queue.`
}
