import { deviceWords } from '@/components/accounts/device-words'
import { EmptyState } from '@/components/ui/empty-state'
import { FormDialog } from '@/components/ui/form-dialog'
import type { SelectOption } from '@/components/ui/select-field'
import type { Column } from '@/components/ui/table'
import { Table } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import type { DeviceDto } from '@/lib/devices/schema'
import { NewCodeButton } from './device-codes'
import { deviceFields, placeWords } from './device-words'
import { RevokeButton } from './revoke-button'

/** Shared tablets and wall screens: where each is, when it was last seen, who is at it. */
export function DeviceTable({
  devices,
  hearths,
  zone,
  canWrite,
  isFiltered,
}: {
  devices: readonly DeviceDto[]
  hearths: readonly SelectOption[]
  zone: string
  canWrite: boolean
  isFiltered: boolean
}) {
  const columns: Column<DeviceDto>[] = [
    {
      key: 'name',
      head: 'Device',
      isRowHead: true,
      cell: (device) => (
        <>
          <span className="font-[640]">{device.name}</span>
          <span className="block text-soft">
            {device.state === 'waiting' ? 'not enrolled yet' : deviceWords(device.userAgent)}
          </span>
        </>
      ),
    },
    { key: 'place', head: 'Place', cell: placeWords },
    { key: 'state', head: 'State', cell: (device) => <State device={device} zone={zone} /> },
    {
      key: 'seen',
      head: 'Last seen',
      cell: (device) =>
        device.lastSeenAt === null ? (
          <span className="text-mute">never</span>
        ) : (
          <Time at={device.lastSeenAt} zone={zone} />
        ),
    },
    {
      key: 'person',
      head: 'Signed in',
      cell: (device) => device.person ?? <span className="text-mute">nobody</span>,
    },
    {
      key: 'idle',
      head: 'Signs out after',
      unit: 'min',
      isNumeric: true,
      cell: (device) => device.idleMinutes,
    },
  ]
  if (canWrite) {
    columns.push({
      key: 'do',
      head: <span className="sr-only">Change</span>,
      className: 'text-right',
      cell: (device) =>
        device.state === 'revoked' ? null : (
          <span className="flex justify-end gap-4">
            <FormDialog
              key={device.revision}
              openLabel="Change"
              openKind="quiet"
              openFor={device.name}
              title={`Change ${device.name}`}
              submitLabel="Save"
              method="PUT"
              path={`/api/devices/${device.id}`}
              fields={deviceFields(hearths, device)}
              fixed={{ revision: device.revision }}
            />
            <NewCodeButton device={device} zone={zone} />
            <RevokeButton device={device} />
          </span>
        ),
    })
  }
  return (
    <Table
      caption="Devices"
      rows={devices}
      rowKey={(device) => device.id}
      columns={columns}
      empty={
        <EmptyState title={isFiltered ? 'No device matches.' : 'No device yet.'}>
          {isFiltered
            ? 'Clear the filters to see those in use.'
            : 'Add a tablet, type its code at it, and toasters change there by PIN.'}
        </EmptyState>
      }
    />
  )
}

function State({ device, zone }: { device: DeviceDto; zone: string }) {
  if (device.state === 'revoked' && device.revokedAt !== null) {
    return (
      <span className="text-mute">
        revoked <Time at={device.revokedAt} zone={zone} />
      </span>
    )
  }
  const code =
    device.codeUntil === null ? null : (
      <span className="block text-soft">
        code until <Time at={device.codeUntil} zone={zone} />
      </span>
    )
  if (device.state === 'waiting') {
    return (
      <>
        <span className="text-amber">waiting for its code</span>
        {code ?? <span className="block text-soft">its code has run out</span>}
      </>
    )
  }
  return (
    <>
      enrolled {device.enrolledAt === null ? null : <Time at={device.enrolledAt} zone={zone} />}
      {code}
    </>
  )
}
