import { classNames } from '@/components/ui/class-names'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/text-field'
import type { PieceDto } from '@/lib/batches/schema'

/** The queue in its order: the next rose first, others by touch, by search or by scanning the route card. */
export function RoomStartPieces({
  pieces,
  isSearching,
  scanWords = null,
  search,
  onSearch,
  isAgain,
  onAgain,
  chosen,
  onChoose,
}: {
  pieces: readonly PieceDto[]
  isSearching: boolean
  scanWords?: string | null
  search: string
  onSearch: (search: string) => void
  isAgain: boolean
  onAgain: (isAgain: boolean) => void
  chosen: PieceDto | null
  onChoose: (piece: PieceDto) => void
}) {
  return (
    <fieldset className="mt-3 flex min-h-0 flex-1 flex-col">
      <legend className="sr-only">Barrel</legend>
      <div className="flex items-end gap-3">
        <TextField
          name="q"
          type="search"
          label={isAgain ? 'One that was fired before' : 'The next of the queue, or another by serial or lot'}
          className="min-w-0 flex-1"
          autoComplete="off"
          value={search}
          onChange={(event) => onSearch(event.target.value)}
          onKeyDown={(event) => {
            // Enter takes the one that was found, and the form is not sent; a scanner's never comes this far.
            if (event.key !== 'Enter') return
            event.preventDefault()
            const [only] = pieces
            if (!isSearching && pieces.length === 1 && only !== undefined) onChoose(only)
          }}
        />
        <Button aria-pressed={isAgain} onClick={() => onAgain(!isAgain)}>
          {isAgain ? 'The queue' : 'Fire again'}
        </Button>
      </div>
      {scanWords === null ? null : (
        <p role="status" className="mt-2 text-[22px] font-[640]">
          {scanWords}
        </p>
      )}
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
                {piece.kind === 'head' ? 'Head ' : ''}
                {piece.serial}{' '}
                <span className="font-normal">
                  {piece.recipe.name}, version {piece.recipe.versionNumber}
                </span>
              </span>
              <span className="block truncate text-[18px] text-soft">
                Batch {piece.batch.number}, {piece.position} of {piece.batch.pieceCount};{' '}
                {piece.customer.name}; lot {piece.batch.woodLot}
                {piece.firedCount === 0
                  ? ''
                  : `; fired ${piece.firedCount === 1 ? 'once' : `${piece.firedCount} times`} before`}
              </span>
            </span>
          </label>
        ))}
        {pieces.length === 0 ? (
          <p className="px-2 py-4 text-soft">{emptyWords(isSearching, search, isAgain)}</p>
        ) : null}
      </div>
    </fieldset>
  )
}

function emptyWords(isSearching: boolean, search: string, isAgain: boolean): string {
  if (isSearching) return 'Looking.'
  if (isAgain) {
    return search.trim() === ''
      ? 'Nothing was fired yet.'
      : `Nothing that was fired before matches “${search.trim()}”.`
  }
  if (search.trim() === '') return 'No rose waits. A master cooper plans a batch on the page Batches.'
  return `No waiting rose matches “${search.trim()}”. Clear the search to see the queue.`
}
