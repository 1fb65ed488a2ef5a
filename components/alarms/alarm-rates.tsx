import Link from 'next/link'
import { Table } from '@/components/ui/table'
import { alarmCatalog } from '@/lib/alarms/alarm-kinds'
import type { AlarmRatesDto } from '@/lib/alarms/schema'
import { formatClock, formatCount, formatInstant, formatNumber } from '@/lib/format'

/** TARGETS, after ISA-18.2. */
const mostPerTenMin = 1

/** How often alarms came, in figures with their n and hours; which ones; and which came again and again. */
export function AlarmRates({ rates, zone }: { rates: AlarmRatesDto; zone: string }) {
  const days = `${formatInstant(rates.from, zone, 'date')} to ${formatInstant(
    Date.parse(rates.until) - 1,
    zone,
    'date',
  )}`
  return (
    <section aria-label="How often" className="mb-7 grid gap-x-10 gap-y-6 lg:grid-cols-2">
      <div>
        <h2>
          How often <span className="font-normal text-mute">{days}</span>
        </h2>
        <p className="mt-1 mb-2 text-soft">
          At most {mostPerTenMin} per 10 min per toaster (common practice after ISA-18.2). In the order of
          names: fires, woods and hearths differ, so these figures rank nobody. Reminders are not counted.
        </p>
        <PerToaster rates={rates} />
      </div>
      <div>
        <h2>Which</h2>
        <PerKind rates={rates} />
        <Chattering rates={rates} />
      </div>
    </section>
  )
}

function PerToaster({ rates }: { rates: AlarmRatesDto }) {
  return (
    <Table
      caption="Alarms per toaster"
      rows={rates.toasters}
      rowKey={(row) => row.id}
      empty={<p className="border-y border-line py-2 text-soft">No barrel was over a fire in these days.</p>}
      columns={[
        { key: 'name', head: 'Toaster', isRowHead: true, cell: (row) => row.name },
        { key: 'alarms', head: 'Alarms', unit: 'n', isNumeric: true, cell: (row) => row.alarms },
        {
          key: 'hours',
          head: 'At the fire',
          unit: 'h',
          isNumeric: true,
          cell: (row) => formatNumber(row.hours, 1),
        },
        { key: 'firings', head: 'Firings', isNumeric: true, cell: (row) => row.firings },
        {
          key: 'perHour',
          head: 'Per hour',
          isNumeric: true,
          cell: (row) => (row.hours > 0 ? formatNumber(row.alarms / row.hours, 1) : ''),
        },
        {
          key: 'perTen',
          head: 'Per 10 min',
          isNumeric: true,
          cell: (row) => <PerTen value={row.perTenMin} />,
        },
      ]}
    />
  )
}

function PerTen({ value }: { value: number | null }) {
  if (value === null) return ''
  if (value <= mostPerTenMin) return formatNumber(value, 2)
  return <span className="font-[640] text-amber">{formatNumber(value, 2)}, over</span>
}

function PerKind({ rates }: { rates: AlarmRatesDto }) {
  return (
    <Table
      caption="Alarms by kind, the most frequent first"
      rows={rates.kinds}
      rowKey={(row) => row.kind}
      empty={<p className="border-y border-line py-2 text-soft">No alarm came in these days.</p>}
      columns={[
        { key: 'kind', head: 'Alarm', isRowHead: true, cell: (row) => alarmCatalog[row.kind].name },
        { key: 'alarms', head: 'Came', unit: 'n', isNumeric: true, cell: (row) => row.alarms },
        {
          key: 'stood',
          head: 'Stood',
          unit: 'median',
          isNumeric: true,
          cell: (row) => (row.medianS === null ? '' : formatClock(row.medianS)),
        },
        {
          key: 'seen',
          head: 'Seen after',
          unit: 'median',
          isNumeric: true,
          cell: (row) => (row.medianSeenS === null ? '' : formatClock(row.medianSeenS)),
        },
      ]}
    />
  )
}

function Chattering({ rates }: { rates: AlarmRatesDto }) {
  const { chattering } = rates
  if (chattering.length === 0) {
    return <p className="mt-2 text-soft">None chattered: none came three times within 10 min.</p>
  }
  return (
    <div className="mt-2">
      <p>
        {formatCount(chattering.length, 'alarm')} chattered, three times or more within 10 min. Look at its
        delays or its cause:
      </p>
      <ul className="mt-1">
        {chattering.map((one) => (
          <li key={`${one.firingId} ${one.kind}`}>
            <Link href={`/firings/${one.firingId}`} className="link">
              {one.serial}
            </Link>
            , {alarmCatalog[one.kind].name.toLowerCase()}, {one.times} times
          </li>
        ))}
      </ul>
    </div>
  )
}
