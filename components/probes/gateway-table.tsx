import { GatewayTokens } from '@/components/probes/gateway-tokens'
import { EmptyState } from '@/components/ui/empty-state'
import { FormDialog } from '@/components/ui/form-dialog'
import type { FormField } from '@/components/ui/form-dialog'
import { Table } from '@/components/ui/table'
import type { Column } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import { formatSigned } from '@/lib/format'
import type { RoomPicture } from '@/lib/probes/get-room-picture'
import type { GatewayDto } from '@/lib/probes/schema'

function gatewayFields(gateway?: GatewayDto): FormField[] {
  return [
    { name: 'name', label: 'Name', kind: 'text', defaultValue: gateway?.name },
    {
      name: 'mayReplay',
      label: 'May send past instants',
      kind: 'checkbox',
      defaultValue: gateway?.mayReplay ?? false,
      hint: 'For imports and tests only. A gateway at a hearth must not.',
    },
  ]
}

export function NewGateway() {
  return (
    <FormDialog
      openLabel="Register a gateway"
      title="Register a gateway"
      submitLabel="Register"
      method="POST"
      path="/api/gateways"
      fields={gatewayFields()}
    >
      <p>Give it a token afterwards; without one it cannot send.</p>
    </FormDialog>
  )
}

/** The boxes that read probes: what each last said, how its clock stands, what was refused. */
export function GatewayTable({ room }: { room: RoomPicture }) {
  const { gateways, tokens, timeZone, mayWrite } = room
  const columns: Column<GatewayDto>[] = [
    {
      key: 'name',
      head: 'Gateway',
      isRowHead: true,
      cell: (gateway) => (
        <>
          <span className="font-[640]">{gateway.name}</span>
          {gateway.mayReplay ? <span className="block text-soft">may send past instants</span> : null}
        </>
      ),
    },
    {
      key: 'seen',
      head: 'Last seen',
      cell: (gateway) =>
        gateway.lastSeenAt === null ? (
          <span className="text-amber">never</span>
        ) : (
          <Time at={gateway.lastSeenAt} zone={timeZone} />
        ),
    },
    {
      key: 'clock',
      head: 'Clock',
      unit: 's ahead of ours',
      isNumeric: true,
      cell: (gateway) => <Clock offsetMs={gateway.clockOffsetMs} />,
    },
    {
      key: 'refused',
      head: 'Refused',
      unit: 'readings',
      isNumeric: true,
      cell: (gateway) =>
        gateway.refusedCount === 0 ? '0' : <span className="text-amber">{gateway.refusedCount} refused</span>,
    },
    { key: 'probes', head: 'Probes', isNumeric: true, cell: (gateway) => gateway.probeCount },
    {
      key: 'tokens',
      head: 'Tokens',
      isNumeric: true,
      cell: (gateway) =>
        gateway.tokenCount === 0 ? <span className="text-amber">none, cannot send</span> : gateway.tokenCount,
    },
  ]
  if (mayWrite) {
    columns.push({
      key: 'do',
      head: <span className="sr-only">Change</span>,
      className: 'text-right',
      cell: (gateway) => (
        <span className="flex justify-end gap-4">
          <FormDialog
            openLabel="Change"
            openKind="quiet"
            openFor={gateway.name}
            title={`Change ${gateway.name}`}
            submitLabel="Save"
            method="PUT"
            path={`/api/gateways/${gateway.id}`}
            fields={gatewayFields(gateway)}
          />
          <GatewayTokens
            gateway={{ id: gateway.id, name: gateway.name }}
            tokens={tokens[gateway.id] ?? []}
            zone={timeZone}
          />
        </span>
      ),
    })
  }
  return (
    <Table
      caption="Gateways"
      rows={gateways}
      rowKey={(gateway) => gateway.id}
      columns={columns}
      empty={
        <EmptyState title="No gateway yet.">
          {mayWrite
            ? 'Register the box that reads the probes, then give it a token.'
            : 'An administrator registers the box that reads the probes.'}
        </EmptyState>
      }
    />
  )
}

/** Over a second off is worth a look: the offset is applied to its readings either way. */
function Clock({ offsetMs }: { offsetMs: number | null }) {
  if (offsetMs === null) return <span className="text-mute">not known</span>
  const words = formatSigned(offsetMs / 1000, 1)
  return Math.abs(offsetMs) > 1000 ? <span className="text-amber">{words}, applied</span> : words
}
