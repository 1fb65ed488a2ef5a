import { EmptyState } from '@/components/ui/empty-state'
import { Table } from '@/components/ui/table'
import type { Column } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import { formatNumber } from '@/lib/format'
import type { WaterCheckDto } from '@/lib/probes/schema'

/** Water checks; of each source only the newest counts, an older one is past. */
export function WaterTable({
  caption,
  checks,
  zone,
  mayCheck,
}: {
  caption: string
  checks: readonly WaterCheckDto[]
  zone: string
  mayCheck: boolean
}) {
  return (
    <Table
      caption={caption}
      rows={checks}
      rowKey={(check) => check.id}
      columns={waterColumns(zone)}
      empty={
        <EmptyState title="No water check yet.">
          {mayCheck
            ? 'Record one: without it a firing starts with a signed override only.'
            : 'A toaster, a master cooper or an administrator records it; without it a firing starts with a signed override only.'}
        </EmptyState>
      }
    />
  )
}

function waterColumns(zone: string): Column<WaterCheckDto>[] {
  return [
    { key: 'source', head: 'Source', isRowHead: true, cell: (check) => check.source },
    {
      key: 'tca',
      head: 'TCA',
      unit: 'ng/L',
      isNumeric: true,
      cell: (check) => formatNumber(check.tcaNgPerL, 2),
    },
    {
      key: 'chlorine',
      head: 'Free chlorine',
      unit: 'mg/L',
      isNumeric: true,
      cell: (check) => formatNumber(check.freeChlorineMgPerL, 3),
    },
    { key: 'by', head: 'Checked by', cell: (check) => check.checkedBy },
    { key: 'at', head: 'Checked', cell: (check) => <Time at={check.checkedAt} zone={zone} style="date" /> },
    { key: 'due', head: 'Due again', cell: (check) => <Due check={check} zone={zone} /> },
    { key: 'use', head: 'Use', className: 'max-w-[26rem]', cell: (check) => <Use check={check} /> },
  ]
}

function Due({ check, zone }: { check: WaterCheckDto; zone: string }) {
  const due = <Time at={check.dueAt} zone={zone} style="date" />
  if (!check.isNewest) return <span className="text-mute">{due}</span>
  if (!check.isInDate) return <span className="font-[560] text-amber">overdue since {due}</span>
  return check.isDueSoon ? <span className="font-[560] text-amber">due soon, {due}</span> : due
}

function Use({ check }: { check: WaterCheckDto }) {
  if (check.overLimit !== null) {
    return <span className="font-[560] text-red">Not to be used. {check.overLimit}</span>
  }
  if (!check.isNewest) return <span className="text-mute">a newer check counts</span>
  return check.isInDate ? 'may be used' : <span className="text-amber">check it first</span>
}
