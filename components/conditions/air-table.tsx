import { TakeBackButton } from '@/components/conditions/take-back-button'
import { EmptyState } from '@/components/ui/empty-state'
import { Table } from '@/components/ui/table'
import type { Column } from '@/components/ui/table'
import type { AirReadingDto } from '@/lib/conditions/schema'
import { formatInstant, formatNumber, toShownTemp, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

/** Temperature and humidity of room and yard, with the moisture that wood comes to in such air. */
export function AirTable({
  readings,
  zone,
  unit,
  mayWrite,
}: {
  readings: readonly AirReadingDto[]
  zone: string
  unit: TemperatureUnit
  mayWrite: boolean
}) {
  return (
    <section>
      <h2 className="mb-2">Air</h2>
      <Table
        caption="Air of room and yard"
        rows={readings}
        rowKey={(reading) => reading.id}
        columns={airColumns(zone, unit, mayWrite)}
        empty={
          <EmptyState title="No reading of the air on this day.">
            {mayWrite
              ? 'Read the thermometer and hygrometer of the room and of the yard, and record both: each firing then has its own.'
              : 'A toaster or a master cooper records it.'}
          </EmptyState>
        }
      />
      {readings.some((reading) => reading.place === 'yard') ? (
        <p className="mt-2 text-small text-soft">
          Wood comes to: equilibrium moisture, percent of dry mass, by the Wood Handbook’s fit (±0.06). Staves
          in the yard move towards it over weeks.
        </p>
      ) : null}
    </section>
  )
}

function airColumns(zone: string, unit: TemperatureUnit, mayWrite: boolean): Column<AirReadingDto>[] {
  const columns: Column<AirReadingDto>[] = [
    {
      key: 'at',
      head: 'Time',
      isRowHead: true,
      className: 'tabular-nums',
      cell: ({ at }) => formatInstant(at, zone, 'time'),
    },
    { key: 'place', head: 'Place', cell: ({ place }) => (place === 'room' ? 'Room' : 'Yard') },
    {
      key: 'temp',
      head: 'Air',
      unit: unitName(unit),
      isNumeric: true,
      cell: ({ tempC }) => formatNumber(toShownTemp(tempC, unit), 1),
    },
    {
      key: 'humidity',
      head: 'Humidity',
      unit: '%',
      isNumeric: true,
      cell: ({ humidityPercent }) => formatNumber(humidityPercent),
    },
    {
      key: 'wood',
      head: 'Wood comes to',
      unit: '%',
      isNumeric: true,
      cell: ({ equilibriumMoisturePercent: moisture }) =>
        moisture === null ? 'beyond the fit' : formatNumber(moisture, 1),
    },
    { key: 'by', head: 'By', cell: ({ by }) => by },
  ]
  if (!mayWrite) return columns
  return [
    ...columns,
    {
      key: 'back',
      head: <span className="sr-only">Take back</span>,
      cell: (reading) => (
        <TakeBackButton
          path={`/api/condition-readings/${reading.id}/remove`}
          what={`the ${reading.place}’s reading of ${formatInstant(reading.at, zone, 'time')}`}
        />
      ),
    },
  ]
}
