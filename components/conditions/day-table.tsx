import Link from 'next/link'
import { EmptyState } from '@/components/ui/empty-state'
import { Table } from '@/components/ui/table'
import type { DayLine } from '@/lib/conditions/schema'
import { formatInstant, formatNumber, toShownTemp, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

/** The days on which something was fired or kept, newest first, each with what it lacks. */
export function DayTable({
  days,
  shown,
  unit,
}: {
  days: readonly DayLine[]
  /** The day above. */
  shown: string
  unit: TemperatureUnit
}) {
  const temp = (tempC: number | null) => (tempC === null ? '' : formatNumber(toShownTemp(tempC, unit), 1))
  return (
    <Table
      caption="Days, newest first"
      rows={days}
      rowKey={(day) => day.day}
      isRowSelected={(day) => day.day === shown}
      columns={[
        {
          key: 'day',
          head: 'Day',
          isRowHead: true,
          cell: ({ day }) => (
            <Link
              href={`/conditions?day=${day}`}
              aria-current={day === shown ? 'date' : undefined}
              className="whitespace-nowrap underline-offset-3 hover:underline"
            >
              {formatInstant(`${day}T12:00:00Z`, 'UTC', 'date')}
            </Link>
          ),
        },
        {
          key: 'firings',
          head: 'Firings',
          isNumeric: true,
          cell: ({ firingCount }) => (firingCount === 0 ? '' : firingCount),
        },
        {
          key: 'room',
          head: 'Room, mean',
          unit: unitName(unit),
          isNumeric: true,
          cell: ({ roomTempC }) => temp(roomTempC),
        },
        {
          key: 'yard',
          head: 'Yard, mean',
          unit: unitName(unit),
          isNumeric: true,
          cell: ({ yardTempC }) => temp(yardTempC),
        },
        {
          key: 'humidity',
          head: 'Yard humidity',
          unit: '%',
          isNumeric: true,
          cell: ({ yardHumidityPercent: humidity }) => (humidity === null ? '' : formatNumber(humidity)),
        },
        {
          key: 'co',
          head: 'CO, 8-hour mean',
          unit: 'ppm',
          isNumeric: true,
          cell: ({ mean8hPpm, isOver }) =>
            mean8hPpm === null ? (
              ''
            ) : (
              <span className={isOver ? 'font-[640] text-red' : ''}>{formatNumber(mean8hPpm, 1)}</span>
            ),
        },
        {
          key: 'peak',
          head: 'Peak',
          unit: 'ppm',
          isNumeric: true,
          cell: ({ peakPpm }) => (peakPpm === null ? '' : formatNumber(peakPpm)),
        },
        {
          key: 'heat',
          head: 'Hottest hour, WBGT',
          unit: unitName(unit),
          isNumeric: true,
          cell: ({ hottestHourC }) => temp(hottestHourC),
        },
        {
          key: 'missing',
          head: 'Missing',
          className: 'max-w-[22rem] text-soft',
          cell: ({ missing }) => missing.map(shortMissing).join(', '),
        },
      ]}
      empty={
        <EmptyState title="Nothing was fired or kept yet.">
          Days appear here with the first firing or reading.
        </EmptyState>
      }
    />
  )
}

/** "No room temperature that day." → "room temperature" */
function shortMissing(sentence: string): string {
  return sentence
    .replace(/^No /, '')
    .replace(/ (today|that day)\..*$/, '')
    .replace(/ reading$/, '')
}
