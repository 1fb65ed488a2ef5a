import Link from 'next/link'
import { Table } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import { responseName, restsOn } from '@/lib/markers/response-words'
import type { MarkerDto } from '@/lib/markers/schema'

/** The markers with the response in force and what it rests on. */
export function MarkerTable({ markers, zone }: { markers: readonly MarkerDto[]; zone: string }) {
  return (
    <Table
      caption="Markers"
      rows={markers}
      rowKey={(marker) => marker.id}
      columns={[
        {
          key: 'name',
          head: 'Marker',
          isRowHead: true,
          cell: (marker) => (
            <Link href={`/markers/${marker.id}`} className="link font-[560]">
              {marker.name}
            </Link>
          ),
        },
        { key: 'unit', head: 'Unit', cell: (marker) => marker.response?.unit ?? marker.unit },
        {
          key: 'response',
          head: 'Response in force',
          cell: ({ response }) => {
            if (response === null) return <span className="text-mute">none yet</span>
            return response.kind === 'formula' ? <code>{response.formula}</code> : responseName(response)
          },
        },
        {
          key: 'rests',
          head: 'Rests on',
          cell: ({ response }) => (response === null ? '' : restsOn(response)),
        },
        { key: 'by', head: 'By', cell: ({ response }) => response?.author ?? '' },
        {
          key: 'at',
          head: 'Since',
          cell: ({ response }) =>
            response === null ? '' : <Time at={response.createdAt} zone={zone} style="date" />,
        },
      ]}
    />
  )
}
