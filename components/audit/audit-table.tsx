import Link from 'next/link'
import { EmptyState } from '@/components/ui/empty-state'
import type { Column } from '@/components/ui/table'
import { Table } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import type { AuditEntryDto } from '@/lib/audit/schema'
import { AuditDetail } from './audit-detail'

/** Entries of the audit trail; a subject leads to all its entries. */
export function AuditTable({ entries, timeZone }: { entries: readonly AuditEntryDto[]; timeZone: string }) {
  const columns: Column<AuditEntryDto>[] = [
    { key: 'seq', head: 'No.', isNumeric: true, isRowHead: true, cell: (one) => one.seq },
    { key: 'at', head: 'When', cell: (one) => <Time at={one.at} zone={timeZone} /> },
    { key: 'who', head: 'Who', cell: (one) => one.actorName },
    { key: 'action', head: 'What', cell: (one) => one.action.replace('.', ' ') },
    {
      key: 'subject',
      head: 'Of what',
      cell: (one) => (
        <Link href={`/audit?${subjectQuery(one)}`} className="link" title={one.subjectId}>
          {one.subjectType} {one.subjectId.slice(0, 8)}
        </Link>
      ),
    },
    { key: 'detail', head: 'Particulars', cell: (one) => <AuditDetail detail={one.detail} /> },
  ]
  return (
    <Table
      caption="Audit trail"
      columns={columns}
      rows={entries}
      rowKey={(one) => String(one.seq)}
      empty={
        <EmptyState title="No entry fits these filters.">
          Write part of a person’s name, an action or its beginning (account, recipe version), or other days.
        </EmptyState>
      }
    />
  )
}

function subjectQuery({ subjectType, subjectId }: AuditEntryDto): string {
  return new URLSearchParams({ subjectType, subjectId }).toString()
}
