import Link from 'next/link'
import { DoseFigure } from '@/components/ui/dose-figure'
import { EmptyState } from '@/components/ui/empty-state'
import { LinkButton } from '@/components/ui/link-button'
import { Table } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import { VerdictText } from '@/components/ui/verdict-text'
import { SketchPair } from '@/components/firings/sketch-pair'
import type { FiringSummary } from '@/lib/firings/schema'
import { formatNumber } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

function Outcome({ firing }: { firing: FiringSummary }) {
  if (firing.score !== null) return <VerdictText verdict={firing.score.verdict} />
  if (firing.state === 'finished') return <span className="text-soft">being scored</span>
  return <span className="text-soft">{firing.state}</span>
}

function Dose({ firing, unit }: { firing: FiringSummary; unit: TemperatureUnit }) {
  const score = firing.score
  if (score === null || score.doseMinutes === null) return <span className="text-mute">none</span>
  const range =
    score.doseLowMinutes === null || score.doseHighMinutes === null
      ? null
      : { lowMin: score.doseLowMinutes, highMin: score.doseHighMinutes }
  return <DoseFigure equivalentMin={score.doseMinutes} range={range} unit={unit} isUnitHidden />
}

/** Firings as rows, each with its small pair; ticked ones are laid over one another. */
export function FiringTable({
  firings,
  zone,
  unit,
}: {
  firings: readonly FiringSummary[]
  zone: string
  unit: TemperatureUnit
}) {
  const isFired = (firing: FiringSummary) => firing.score !== null
  return (
    <Table
      caption="Firings"
      rows={firings}
      rowKey={(firing) => firing.id}
      empty={
        <EmptyState title="No firing fits." action={<LinkButton href="/room">Go to the room</LinkButton>}>
          Change the filters, or start a firing in the room.
        </EmptyState>
      }
      columns={[
        {
          key: 'pick',
          head: <span className="sr-only">Lay over</span>,
          cell: (firing) =>
            isFired(firing) ? (
              <input
                type="checkbox"
                form="overlay"
                name="id"
                value={firing.id}
                className="mt-1 size-4 accent-water"
                aria-label={`Lay over barrel ${firing.piece.serial}`}
              />
            ) : null,
        },
        {
          key: 'pair',
          head: <span className="sr-only">Picture</span>,
          cell: (firing) => (
            <SketchPair sketch={firing.score?.sketch} title={`Barrel ${firing.piece.serial}`} unit={unit} />
          ),
        },
        {
          key: 'serial',
          head: 'Barrel',
          isRowHead: true,
          cell: (firing) => (
            <>
              <Link
                href={`/firings/${firing.id}`}
                className="whitespace-nowrap font-[640] underline-offset-3 hover:underline"
              >
                {firing.piece.serial}
              </Link>
              <span className="block whitespace-nowrap text-soft">
                Batch {firing.batch.number}, {firing.piece.position} of {firing.batch.pieceCount}
              </span>
            </>
          ),
        },
        {
          key: 'recipe',
          head: 'Recipe',
          cell: (firing) => (
            <>
              {firing.recipe.name}
              <span className="block text-soft">
                version {firing.recipe.versionNumber}
                {firing.isTrial ? ', trial' : ''}
              </span>
            </>
          ),
        },
        { key: 'hearth', head: 'Hearth', isNumeric: true, cell: (firing) => firing.hearthNumber ?? '' },
        { key: 'toaster', head: 'Toaster', cell: (firing) => firing.toaster?.name ?? '' },
        {
          key: 'started',
          head: 'Toast started',
          cell: (firing) =>
            firing.toastAt === null ? (
              <span className="text-mute">not yet</span>
            ) : (
              <Time at={firing.toastAt} zone={zone} />
            ),
        },
        {
          key: 'dose',
          head: 'Dose',
          unit: 'min at 200 °C',
          isNumeric: true,
          cell: (firing) => <Dose firing={firing} unit={unit} />,
        },
        { key: 'verdict', head: 'Verdict', cell: (firing) => <Outcome firing={firing} /> },
        {
          key: 'points',
          head: 'Points',
          isNumeric: true,
          cell: (firing) =>
            firing.score === null || firing.score.points === null ? '' : formatNumber(firing.score.points),
        },
      ]}
    />
  )
}
