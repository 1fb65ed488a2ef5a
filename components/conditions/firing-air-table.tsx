import Link from 'next/link'
import { EmptyState } from '@/components/ui/empty-state'
import { Table } from '@/components/ui/table'
import type { AirReadingDto, DayFiring } from '@/lib/conditions/schema'
import { formatInstant, formatNumber, formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

/** The firings of a day, each with the readings that stand around it by the site's rule. */
export function FiringAirTable({
  firings,
  zone,
  unit,
  isToday,
}: {
  firings: readonly DayFiring[]
  zone: string
  unit: TemperatureUnit
  isToday: boolean
}) {
  return (
    <section>
      <h2 className="mb-2">Firings</h2>
      <Table
        caption="Firings of this day and their air"
        rows={firings}
        rowKey={(firing) => firing.id}
        columns={[
          {
            key: 'serial',
            head: 'Serial',
            isRowHead: true,
            cell: ({ id, serial }) => (
              <Link
                href={`/firings/${id}`}
                className="font-[640] whitespace-nowrap underline-offset-3 hover:underline"
              >
                {serial}
              </Link>
            ),
          },
          {
            key: 'hearth',
            head: 'Hearth',
            isNumeric: true,
            cell: ({ hearthNumber }) => hearthNumber ?? '',
          },
          {
            key: 'at',
            head: 'Toast from',
            className: 'tabular-nums whitespace-nowrap',
            cell: ({ at, isFirstOfDay }) =>
              `${formatInstant(at, zone, 'time')}${isFirstOfDay ? ', first' : ''}`,
          },
          { key: 'room', head: 'Room', cell: ({ room }) => <Air reading={room} zone={zone} unit={unit} /> },
          { key: 'yard', head: 'Yard', cell: ({ yard }) => <Air reading={yard} zone={zone} unit={unit} /> },
        ]}
        empty={
          <EmptyState title={isToday ? 'No firing today yet.' : 'No firing on this day.'}>
            A firing takes the readings of its day that are nearest to its toast start.
          </EmptyState>
        }
      />
    </section>
  )
}

function Air({
  reading,
  zone,
  unit,
}: {
  reading: AirReadingDto | null
  zone: string
  unit: TemperatureUnit
}) {
  if (reading === null) return <span className="text-mute">none near enough</span>
  return (
    <span className="whitespace-nowrap">
      {formatTemp(reading.tempC, unit, 1)}, {formatNumber(reading.humidityPercent)}
      {'\u00a0%'} <span className="text-mute">at {formatInstant(reading.at, zone, 'time')}</span>
    </span>
  )
}
