import { CheckProbe } from '@/components/probes/check-probe'
import { ChangeProbe } from '@/components/probes/probe-dialog'
import { EmptyState } from '@/components/ui/empty-state'
import { Table } from '@/components/ui/table'
import type { Column } from '@/components/ui/table'
import {
  formatInstant,
  formatNumber,
  formatTemp,
  formatTempDifference,
  toShownDifference,
} from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { RoomPicture } from '@/lib/probes/get-room-picture'
import type { ProbeDto } from '@/lib/probes/schema'

/** Probes with place, type and checks; what is overdue says so. */
export function ProbeTable({ room, unit }: { room: RoomPicture; unit: TemperatureUnit }) {
  const { probes, timeZone } = room
  const columns: Column<ProbeDto>[] = [
    {
      key: 'name',
      head: 'Probe',
      isRowHead: true,
      cell: (probe) => (
        <>
          <span className="font-[640]">{probe.name}</span>
          <span className="block text-soft">
            {probe.hearth === null ? 'no hearth' : `hearth ${probe.hearth.number}`}, {probe.usualRole}
          </span>
        </>
      ),
    },
    { key: 'place', head: 'Place', cell: placeWords },
    {
      key: 'type',
      head: 'Type',
      cell: (probe) => (
        <>
          {probe.thermocoupleType} class {probe.iecClass}
          {probe.serial === '' ? null : <span className="block text-soft">{probe.serial}</span>}
        </>
      ),
    },
    {
      key: 'gateway',
      head: 'Gateway',
      cell: (probe) => (
        <>
          {probe.gateway.name}
          <span className="block text-soft">channel {probe.channel}</span>
        </>
      ),
    },
    {
      key: 'checks',
      head: 'Newest checks',
      cell: (probe) => <Checks probe={probe} zone={timeZone} unit={unit} />,
    },
    { key: 'due', head: 'Next due', cell: (probe) => <Due probe={probe} zone={timeZone} /> },
  ]
  if (room.mayCheck || room.mayWrite) {
    columns.push({
      key: 'do',
      head: <span className="sr-only">Do</span>,
      cell: (probe) => (
        <span className="flex justify-end gap-4">
          {room.mayCheck ? <CheckProbe probe={probe} unit={unit} /> : null}
          {room.mayWrite ? <ChangeProbe probe={probe} room={room} /> : null}
        </span>
      ),
    })
  }
  return (
    <Table
      caption="Probes"
      rows={probes}
      rowKey={(probe) => probe.id}
      columns={columns}
      empty={
        <EmptyState title="No probe here.">
          {room.mayWrite
            ? 'Add each thermocouple with its gateway, channel and place. The lead probe’s place must be the one that recipes are written for.'
            : 'An administrator adds the probes.'}
        </EmptyState>
      }
    />
  )
}

function placeWords({ place }: ProbeDto): string {
  const depth =
    place.height === 'coals' ? '' : `, ${formatNumber(place.depthMm, place.depthMm % 1 === 0 ? 0 : 1)} mm`
  return `${place.height} ${place.side}${depth}, ${place.mounting}`
}

function Checks({ probe, zone, unit }: { probe: ProbeDto; zone: string; unit: TemperatureUnit }) {
  if (probe.checks.length === 0) return <span className="text-mute">none</span>
  return (
    <ul>
      {probe.checks.map((check) => (
        <li key={check.id}>
          {formatTemp(check.referenceTempC, unit)}, corrected{' '}
          {formatNumber(toShownDifference(check.correctionC, unit), 1)}
          {' ±'}
          {formatTempDifference(check.uncertaintyC, unit, 1)}{' '}
          <span className="text-soft">{formatInstant(check.checkedAt, zone, 'date')}</span>
        </li>
      ))}
    </ul>
  )
}

function Due({ probe, zone }: { probe: ProbeDto; zone: string }) {
  if (probe.checkDueAt === null) {
    // A coals probe makes no dose.
    return probe.usualRole === 'coals' ? (
      <span className="text-mute">not asked</span>
    ) : (
      <span className="font-[560] text-amber">never checked</span>
    )
  }
  const date = formatInstant(probe.checkDueAt, zone, 'date')
  return probe.isCheckDue ? <span className="font-[560] text-amber">overdue since {date}</span> : <>{date}</>
}
