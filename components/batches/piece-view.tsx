import Link from 'next/link'
import { SketchPair } from '@/components/firings/sketch-pair'
import { DoseFigure } from '@/components/ui/dose-figure'
import { EmptyState } from '@/components/ui/empty-state'
import { NumbersLink } from '@/components/numbers/numbers-link'
import { PageHead } from '@/components/ui/page-head'
import { Table } from '@/components/ui/table'
import { VerdictText } from '@/components/ui/verdict-text'
import type { PieceDto } from '@/lib/batches/schema'
import { summedDose } from '@/lib/batches/summed-dose'
import type { FiringSummary } from '@/lib/firings/schema'
import { formatInstant, formatNumber } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

type Props = {
  piece: PieceDto
  /** Newest first. */
  firings: readonly FiringSummary[]
  zone: string
  unit: TemperatureUnit
}

/** One barrel or head with every firing of it: each its own curve, dose and score. */
export function PieceView({ piece, firings, zone, unit }: Props) {
  const begun = firings.filter((firing) => firing.preheatAt !== null)
  return (
    <>
      <PageHead title={piece.serial} />
      <p className="mb-4 text-soft">
        {piece.kind === 'head' ? 'Head' : 'Barrel'}, {piece.sizeAndShape}; batch {piece.batch.number},{' '}
        {piece.position} of {piece.batch.pieceCount}; {piece.customer.name}; lot {piece.batch.woodLot};{' '}
        {piece.recipe.name}, version {piece.recipe.versionNumber}
      </p>
      <Table
        caption={`Firings of ${piece.serial}`}
        rows={begun}
        rowKey={(firing) => firing.id}
        empty={
          <EmptyState title="Not fired yet.">
            It waits in the queue. Choose a hearth in the room to start it.
          </EmptyState>
        }
        columns={[
          {
            key: 'started',
            head: `Started, ${zone}`,
            isRowHead: true,
            cell: (firing) => (
              <Link href={`/firings/${firing.id}`} className="font-[640] whitespace-nowrap hover:underline">
                {formatInstant(firing.preheatAt ?? firing.queuedAt, zone, 'dateTime')}
              </Link>
            ),
          },
          {
            key: 'curve',
            head: 'Curve',
            cell: (firing) => (
              <SketchPair sketch={firing.score?.sketch} title={`Firing of ${piece.serial}`} unit={unit} />
            ),
          },
          { key: 'hearth', head: 'Hearth', isNumeric: true, cell: (firing) => firing.hearthNumber ?? '' },
          { key: 'toaster', head: 'Toaster', cell: (firing) => firing.toaster?.name ?? '' },
          { key: 'state', head: 'Firing', cell: (firing) => <State firing={firing} /> },
          {
            key: 'dose',
            head: 'Dose',
            unit: 'min at 200 °C',
            isNumeric: true,
            cell: (firing) => <Dose firing={firing} unit={unit} />,
          },
          {
            key: 'points',
            head: 'Points',
            isNumeric: true,
            cell: (firing) => pointsWords(firing.score?.points ?? null),
          },
        ]}
      />
      <Sum firings={begun} unit={unit} />
      <p className="mt-2 text-mute">
        <NumbersLink />
      </p>
    </>
  )
}

function pointsWords(points: number | null): string {
  return points === null ? '' : formatNumber(points)
}

function State({ firing }: { firing: FiringSummary }) {
  if (firing.score !== null) return <VerdictText verdict={firing.score.verdict} />
  return <span className="text-soft">{firing.state === 'finished' ? 'being scored' : firing.state}</span>
}

function Dose({ firing, unit }: { firing: FiringSummary; unit: TemperatureUnit }) {
  const score = firing.score
  if (score === null || score.doseMinutes === null) return null
  const range =
    score.doseLowMinutes === null || score.doseHighMinutes === null
      ? null
      : { lowMin: score.doseLowMinutes, highMin: score.doseHighMinutes }
  return <DoseFigure equivalentMin={score.doseMinutes} range={range} unit={unit} isUnitHidden />
}

/** Only of two and more: said to be a sum, and held against no target. */
function Sum({ firings, unit }: { firings: readonly FiringSummary[]; unit: TemperatureUnit }) {
  const sum = summedDose(firings)
  if (sum === null) return null
  return (
    <p className="mt-4">
      <span className="font-[640]">Sum of {sum.count} firings:</span>{' '}
      <DoseFigure
        equivalentMin={sum.doseMin}
        range={{ lowMin: sum.lowMin, highMin: sum.highMin }}
        unit={unit}
      />
      .{' '}
      <span className="text-soft">
        A sum of doses at the lead probe, not a dose of one fire: it has no target and no score.
        {sum.missingCount === 0
          ? ''
          : ` ${sum.missingCount === 1 ? 'One firing has' : `${sum.missingCount} firings have`} no dose and ${sum.missingCount === 1 ? 'is' : 'are'} not in it, so the wood has had more.`}
      </span>
    </p>
  )
}
