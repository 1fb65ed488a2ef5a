import Link from 'next/link'
import { EmptyState } from '@/components/ui/empty-state'
import { FormDialog } from '@/components/ui/form-dialog'
import type { FormField } from '@/components/ui/form-dialog'
import { Table } from '@/components/ui/table'
import type { Column } from '@/components/ui/table'
import type { HearthDto } from '@/lib/probes/schema'

function hearthFields(hearth?: HearthDto): FormField[] {
  return [
    { name: 'number', label: 'Number', kind: 'number', defaultValue: hearth?.number },
    {
      name: 'name',
      label: 'Name',
      kind: 'text',
      defaultValue: hearth?.name,
      hint: 'As the room calls it; may be empty.',
    },
    { name: 'isActive', label: 'In use', kind: 'checkbox', defaultValue: hearth?.isActive ?? true },
  ]
}

export function NewHearth() {
  return (
    <FormDialog
      openLabel="Add a hearth"
      title="Add a hearth"
      submitLabel="Add"
      method="POST"
      path="/api/hearths"
      fields={hearthFields()}
    />
  )
}

function ProbeLinks({ probes }: { probes: HearthDto['probes'] }) {
  return probes.map((probe, index) => (
    <span key={probe.id}>
      {index === 0 ? '' : ', '}
      <Link className="link" href={`/probes/${probe.id}`}>
        {probe.name}
      </Link>{' '}
      <span className="text-soft">{probe.usualRole}</span>
    </span>
  ))
}

/** Hearths with what stands there now and the probes that usually do. */
export function HearthTable({ hearths, mayWrite }: { hearths: readonly HearthDto[]; mayWrite: boolean }) {
  const columns: Column<HearthDto>[] = [
    {
      key: 'number',
      head: 'Hearth',
      isRowHead: true,
      cell: (hearth) => (
        <>
          <span className="font-[640]">{hearth.number}</span>
          {hearth.name === '' ? null : ` ${hearth.name}`}
        </>
      ),
    },
    {
      key: 'live',
      head: 'Now',
      cell: (hearth) =>
        hearth.live === null ? (
          <span className="text-soft">{hearth.isActive ? 'free' : 'not in use'}</span>
        ) : (
          <Link className="link" href={`/fireside/${hearth.live.firingId}`}>
            {hearth.live.serial}, {hearth.live.state}
          </Link>
        ),
    },
    {
      key: 'probes',
      head: 'Usual probes',
      cell: (hearth) =>
        hearth.probes.length === 0 ? (
          <span className="text-amber">none: a firing needs its lead probe</span>
        ) : (
          <ProbeLinks probes={hearth.probes} />
        ),
    },
  ]
  if (mayWrite) {
    columns.push({
      key: 'do',
      head: <span className="sr-only">Change</span>,
      className: 'text-right',
      cell: (hearth) => (
        <FormDialog
          openLabel="Change"
          openKind="quiet"
          openFor={`hearth ${hearth.number}`}
          title={`Change hearth ${hearth.number}`}
          submitLabel="Save"
          method="PUT"
          path={`/api/hearths/${hearth.id}`}
          fields={hearthFields(hearth)}
        />
      ),
    })
  }
  return (
    <Table
      caption="Hearths"
      rows={hearths}
      rowKey={(hearth) => hearth.id}
      columns={columns}
      empty={
        <EmptyState title="No hearth yet.">
          {mayWrite ? 'Add the first hearth, then its probes.' : 'An administrator adds the hearths.'}
        </EmptyState>
      }
    />
  )
}
