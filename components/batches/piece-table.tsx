import Link from 'next/link'
import { DoseFigure } from '@/components/ui/dose-figure'
import { EmptyState } from '@/components/ui/empty-state'
import { Table } from '@/components/ui/table'
import { VerdictText } from '@/components/ui/verdict-text'
import type { PieceDto } from '@/lib/batches/schema'
import { verdicts } from '@/lib/firings/schema'
import { formatNumber } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

function State({ piece, hasFirings }: { piece: PieceDto; hasFirings: boolean }) {
  if (piece.firing === null || piece.firing.state === 'queued')
    return <span className="text-soft">waiting</span>
  if (!hasFirings) return <StateWords piece={piece} />
  return (
    <Link href={`/firings/${piece.firing.id}`} className="underline-offset-3 hover:underline">
      <StateWords piece={piece} />
    </Link>
  )
}

function StateWords({ piece }: { piece: PieceDto }) {
  const verdict = verdicts.find((one) => one === piece.firing?.verdict)
  if (verdict !== undefined) return <VerdictText verdict={verdict} />
  return (
    <span className="text-soft">
      {piece.firing?.state === 'finished' ? 'being scored' : piece.firing?.state}
    </span>
  )
}

function Dose({ piece, unit }: { piece: PieceDto; unit: TemperatureUnit }) {
  const firing = piece.firing
  if (firing === null || firing.doseMinutes === null) return null
  const range =
    firing.doseLowMinutes === null || firing.doseHighMinutes === null
      ? null
      : { lowMin: firing.doseLowMinutes, highMin: firing.doseHighMinutes }
  return <DoseFigure equivalentMin={firing.doseMinutes} range={range} unit={unit} isUnitHidden />
}

/** Barrels and heads with their newest firing. `hasFirings`: link to both (customers have pages of neither). */
export function PieceTable({
  pieces,
  unit,
  isBatchShown = true,
  hasFirings = true,
}: {
  pieces: readonly PieceDto[]
  unit: TemperatureUnit
  isBatchShown?: boolean
  hasFirings?: boolean
}) {
  const batchColumns = [
    {
      key: 'batch',
      head: 'Batch',
      cell: (piece: PieceDto) => `${piece.batch.number}, ${piece.position} of ${piece.batch.pieceCount}`,
    },
    { key: 'customer', head: 'Customer', cell: (piece: PieceDto) => piece.customer.name },
    {
      key: 'recipe',
      head: 'Recipe',
      cell: (piece: PieceDto) => `${piece.recipe.name}, version ${piece.recipe.versionNumber}`,
    },
    { key: 'lot', head: 'Wood lot', cell: (piece: PieceDto) => piece.batch.woodLot },
  ]
  return (
    <Table
      caption="Barrels and heads"
      rows={pieces}
      rowKey={(piece) => piece.id}
      empty={<EmptyState title="No barrel fits.">Change the search, or make a batch first.</EmptyState>}
      columns={[
        {
          key: 'serial',
          head: 'Serial',
          isRowHead: true,
          cell: (piece) =>
            hasFirings ? (
              <Link
                href={`/barrels/${piece.id}`}
                className="font-[640] whitespace-nowrap underline-offset-3 hover:underline"
              >
                {piece.serial}
              </Link>
            ) : hasFirings ? (
              <Link
                href={`/barrels/${piece.id}`}
                className="font-[640] whitespace-nowrap underline-offset-3 hover:underline"
              >
                {piece.serial}
              </Link>
            ) : (
              <span className="font-[640] whitespace-nowrap">{piece.serial}</span>
            ),
        },
        { key: 'kind', head: 'Piece', cell: (piece) => `${piece.kind}, ${piece.sizeAndShape}` },
        ...(isBatchShown ? batchColumns : []),
        { key: 'state', head: 'Firing', cell: (piece) => <State piece={piece} hasFirings={hasFirings} /> },
        {
          key: 'dose',
          head: 'Dose',
          unit: 'min at 200 °C',
          isNumeric: true,
          cell: (piece) => <Dose piece={piece} unit={unit} />,
        },
        {
          key: 'points',
          head: 'Points',
          isNumeric: true,
          cell: (piece) =>
            piece.firing === null || piece.firing.points === null ? '' : formatNumber(piece.firing.points),
        },
      ]}
    />
  )
}
