import Link from 'next/link'
import { GatewayState } from '@/components/probes/gateway-state'
import { EmptyState } from '@/components/ui/empty-state'
import { Table } from '@/components/ui/table'
import { formatSigned } from '@/lib/format'
import type { GatewayDto } from '@/lib/probes/schema'

/** The boxes that read probes: how each stands, its clock, what waits, what was refused and what was lost. */
export function GatewayTable({
  gateways,
  nowMs,
  mayWrite,
}: {
  gateways: readonly GatewayDto[]
  nowMs: number
  mayWrite: boolean
}) {
  return (
    <Table
      caption="Gateways"
      rows={gateways}
      rowKey={(gateway) => gateway.id}
      empty={
        <EmptyState title="No gateway yet.">
          {mayWrite
            ? 'Register the box that reads the probes, then make a code and enrol its program with it.'
            : 'An administrator registers the box that reads the probes.'}
        </EmptyState>
      }
      columns={[
        {
          key: 'name',
          head: 'Gateway',
          isRowHead: true,
          cell: (gateway) => (
            <>
              <Link className="link font-[640]" href={`/probes/gateways/${gateway.id}`}>
                {gateway.name}
              </Link>
              {gateway.mayReplay ? <span className="block text-soft">may send past instants</span> : null}
            </>
          ),
        },
        {
          key: 'state',
          head: 'State',
          className: 'max-w-[30rem]',
          cell: (gateway) => <GatewayState gateway={gateway} nowMs={nowMs} />,
        },
        { key: 'probes', head: 'Probes', isNumeric: true, cell: (gateway) => gateway.probeCount },
        {
          key: 'clock',
          head: 'Clock behind',
          unit: 's',
          isNumeric: true,
          cell: ({ clockOffsetMs }) =>
            clockOffsetMs === null ? (
              <span className="text-mute">not known</span>
            ) : (
              formatSigned(clockOffsetMs / 1000, 1)
            ),
        },
        {
          key: 'waits',
          head: 'Waits there',
          unit: 'readings',
          isNumeric: true,
          cell: ({ status }) => status?.spooledReadings ?? <span className="text-mute">not told</span>,
        },
        { key: 'refused', head: 'Refused', isNumeric: true, cell: ({ refusedCount }) => refusedCount },
        { key: 'lost', head: 'Lost', isNumeric: true, cell: ({ lostCount }) => lostCount },
      ]}
    />
  )
}
