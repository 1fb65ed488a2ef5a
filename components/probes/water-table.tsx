import { EmptyState } from '@/components/ui/empty-state'
import { FormDialog } from '@/components/ui/form-dialog'
import { Notice } from '@/components/ui/notice'
import { Table } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import { formatNumber } from '@/lib/format'
import type { RoomPicture } from '@/lib/probes/get-room-picture'

export function NewWaterCheck() {
  return (
    <FormDialog
      openLabel="Record a water check"
      title="Record a water check"
      submitLabel="Record"
      method="POST"
      path="/api/water-checks"
      fields={[
        { name: 'source', label: 'Source', kind: 'text', hint: 'Mains, well, tank: as the room calls it.' },
        { name: 'tcaNgPerL', label: 'TCA', kind: 'number', unit: 'ng/L' },
        { name: 'freeChlorineMgPerL', label: 'Free chlorine', kind: 'number', unit: 'mg/L' },
        {
          name: 'checkedAt',
          label: 'Checked on',
          kind: 'date',
          isLeftOutWhenEmpty: true,
          hint: 'Left empty: now.',
        },
        { name: 'dueAt', label: 'Due again on', kind: 'date' },
      ]}
    />
  )
}

/** Checks of preheat, leak-test and humidifier water; a firing starts on water in date only. */
export function WaterTable({ room: { waterChecks, timeZone, mayCheck } }: { room: RoomPicture }) {
  const isOut = waterChecks[0]?.isInDate === false
  return (
    <>
      {isOut ? (
        <Notice tone="attention" className="mb-3">
          The newest water check is out of date: a firing starts with a signed override only.
        </Notice>
      ) : null}
      <Table
        caption="Water checks"
        rows={waterChecks}
        rowKey={(check) => check.id}
        empty={
          <EmptyState title="No water check yet.">
            {mayCheck
              ? 'Record one: without it a firing starts with a signed override only.'
              : 'A toaster, a master cooper or an administrator records it; without it a firing starts with a signed override only.'}
          </EmptyState>
        }
        columns={[
          { key: 'source', head: 'Source', isRowHead: true, cell: (check) => check.source },
          {
            key: 'tca',
            head: 'TCA',
            unit: 'ng/L',
            isNumeric: true,
            cell: (check) => formatNumber(check.tcaNgPerL, 1),
          },
          {
            key: 'chlorine',
            head: 'Free chlorine',
            unit: 'mg/L',
            isNumeric: true,
            cell: (check) => formatNumber(check.freeChlorineMgPerL, 2),
          },
          { key: 'by', head: 'Checked by', cell: (check) => check.checkedBy },
          {
            key: 'at',
            head: 'Checked',
            cell: (check) => <Time at={check.checkedAt} zone={timeZone} style="date" />,
          },
          {
            key: 'due',
            head: 'Due again',
            cell: (check) => {
              const due = <Time at={check.dueAt} zone={timeZone} style="date" />
              if (check.isInDate) return due
              // Only the newest counts; an older one that ran out is past, not overdue.
              if (check.id !== waterChecks[0]?.id) return <span className="text-mute">{due}</span>
              return <span className="font-[560] text-amber">overdue since {due}</span>
            },
          },
        ]}
      />
    </>
  )
}
