import Link from 'next/link'
import { EmptyState } from '@/components/ui/empty-state'
import { LinkButton } from '@/components/ui/link-button'
import { Table } from '@/components/ui/table'
import type { MarkerPredictionDto, VersionMarkers } from '@/lib/markers/schema'
import { threeDigits } from '@/lib/science/three-digits'
import { LotAssays } from './lot-assays'

/** The markers that a recipe version's plan would make: each with its interval and what it rests on. */
export function PredictionTable({
  markers,
  lot,
  isDraft,
}: {
  markers: VersionMarkers
  /** Lot assays as the address has them. */
  lot: string
  isDraft: boolean
}) {
  const { predictions, without, lotAssays } = markers
  return (
    <section aria-labelledby="markers" className="mt-9">
      <h2 id="markers" className="mb-1 font-[640]">
        Markers
      </h2>
      {predictions.length === 0 ? (
        <EmptyState
          title="No marker has a response yet."
          action={<LinkButton href="/markers">Markers</LinkButton>}
        >
          Fit one from laboratory results or write a formula, and it is predicted here.
        </EmptyState>
      ) : (
        <>
          <p className="mb-2 max-w-[80ch] text-soft">
            {isDraft ? 'For the draft as it was last saved, ' : 'For a firing '}exactly to this plan. 19 of 20
            further barrels like those behind a fit would lie in its interval.
          </p>
          {lotAssays.length === 0 ? null : <LotAssays assays={lotAssays} lot={lot} />}
          <Predictions predictions={predictions} />
          {without.length === 0 ? null : (
            <p className="mt-2 text-soft">Without a response: {without.join(', ')}.</p>
          )}
        </>
      )}
    </section>
  )
}

function Predictions({ predictions }: { predictions: readonly MarkerPredictionDto[] }) {
  return (
    <Table
      caption="Predicted markers"
      rows={predictions}
      rowKey={(prediction) => prediction.marker.id}
      columns={[
        {
          key: 'name',
          head: 'Marker',
          isRowHead: true,
          cell: ({ marker }) => (
            <Link href={`/markers/${marker.id}`} className="link">
              {marker.name}
            </Link>
          ),
        },
        {
          key: 'value',
          head: 'Predicted',
          isNumeric: true,
          cell: ({ value }) =>
            value === null ? '' : <span className="font-[560]">{threeDigits(value)}</span>,
        },
        {
          key: 'interval',
          head: '95 % interval',
          isNumeric: true,
          cell: ({ interval, value }) => {
            if (interval !== null) return `${threeDigits(interval.low)} to ${threeDigits(interval.high)}`
            return value === null ? '' : <span className="text-soft">none</span>
          },
        },
        { key: 'unit', head: 'Unit', cell: ({ unit }) => unit },
        {
          key: 'rests',
          head: 'Rests on',
          cell: ({ refusal, restsOn }) => (
            <>
              {refusal === null ? null : <span className="block text-amber">Not predicted. {refusal}</span>}
              <span className={refusal === null ? '' : 'text-soft'}>
                {restsOn.replace(/^./, (one) => one.toUpperCase())}
              </span>
            </>
          ),
        },
      ]}
    />
  )
}
