import { EmptyState } from '@/components/ui/empty-state'
import { Table } from '@/components/ui/table'
import type { Column } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import { formatNumber, formatSigned, toShownDifference, toShownTemp, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { ProbeCheckDto } from '@/lib/probes/schema'

const kindNames = { ice: 'melting ice', boiling: 'boiling water', block: 'block or thermometer' } as const

/** Every check of a probe, newest first. */
export function CheckTable({
  checks,
  zone,
  unit,
}: {
  checks: readonly ProbeCheckDto[]
  zone: string
  unit: TemperatureUnit
}) {
  return (
    <Table
      caption="Checks"
      rows={checks}
      rowKey={(check) => check.id}
      columns={checkColumns(zone, unit)}
      empty={
        <EmptyState title="Never checked.">
          Until it is, its class alone says how far it may be off, and it leads a firing by signed override
          only.
        </EmptyState>
      }
    />
  )
}

function checkColumns(zone: string, unit: TemperatureUnit): Column<ProbeCheckDto>[] {
  const shown = (tempC: number) => formatNumber(toShownTemp(tempC, unit), 1)
  return [
    {
      key: 'at',
      head: 'Checked',
      isRowHead: true,
      cell: (check) => <Time at={check.checkedAt} zone={zone} style="date" />,
    },
    {
      key: 'kind',
      head: 'Against',
      cell: (check) => (
        <>
          {kindNames[check.kind]}
          <span className="block text-soft">{pressureWords(check)}</span>
        </>
      ),
    },
    {
      key: 'reference',
      head: 'Reference',
      unit: unitName(unit),
      isNumeric: true,
      cell: (check) => shown(check.referenceTempC),
    },
    {
      key: 'read',
      head: 'It read',
      unit: unitName(unit),
      isNumeric: true,
      cell: (check) => shown(check.measuredTempC),
    },
    {
      key: 'correction',
      head: 'Correction',
      unit: unitName(unit),
      isNumeric: true,
      cell: (check) => formatSigned(toShownDifference(check.correctionC, unit), 2),
    },
    {
      key: 'half',
      head: '±',
      unit: 'k = 2',
      isNumeric: true,
      cell: (check) => formatNumber(toShownDifference(check.uncertaintyC, unit), 2),
    },
    {
      key: 'way',
      head: 'How',
      cell: (check) => (check.way === 'live' ? 'its own settled readings' : 'read by eye'),
    },
    { key: 'by', head: 'By', cell: (check) => check.checkedBy },
    { key: 'due', head: 'Due again', cell: (check) => <Time at={check.dueAt} zone={zone} style="date" /> },
  ]
}

function pressureWords({ stationPressureHpa, altitudeM }: ProbeCheckDto): string {
  if (stationPressureHpa === null) return ''
  const pressure = `${formatNumber(stationPressureHpa, 0)}\u00a0hPa`
  return altitudeM === null ? pressure : `${pressure}, from ${formatNumber(altitudeM, 0)}\u00a0m`
}
