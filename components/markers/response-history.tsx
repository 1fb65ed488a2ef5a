import Link from 'next/link'
import { EmptyState } from '@/components/ui/empty-state'
import { Table } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import { responseName, restsOn } from '@/lib/markers/response-words'
import type { MarkerDetail } from '@/lib/markers/schema'

/** Every response that a marker had, the newest first; an earlier one can be looked at and taken up again. */
export function ResponseHistory({
  marker,
  zone,
  canWrite,
}: {
  marker: MarkerDetail
  zone: string
  canWrite: boolean
}) {
  return (
    <Table
      caption="Responses"
      rows={marker.responses}
      rowKey={(response) => response.id}
      empty={<EmptyState title="This marker has had no response yet." />}
      columns={[
        {
          key: 'number',
          head: 'No.',
          isNumeric: true,
          isRowHead: true,
          cell: (response) => (
            <Link href={`/markers/${marker.id}?number=${response.number}`} className="link">
              {response.number}
            </Link>
          ),
        },
        {
          key: 'what',
          head: 'Response',
          cell: (response) => (
            <>
              {response.kind === 'formula' ? (
                <code className="break-words">{response.formula}</code>
              ) : (
                responseName(response)
              )}
              {response.id === marker.response?.id ? <span className="text-soft"> in force</span> : null}
              {response.note === '' ? null : <span className="block text-soft">{response.note}</span>}
            </>
          ),
        },
        { key: 'rests', head: 'Rests on', cell: (response) => restsOn(response) },
        { key: 'by', head: 'By', cell: (response) => response.author },
        {
          key: 'at',
          head: 'Written',
          cell: (response) => <Time at={response.createdAt} zone={zone} style="date" />,
        },
        {
          key: 'again',
          head: <span className="sr-only">Take it up again</span>,
          cell: (response) =>
            canWrite && response.id !== marker.response?.id ? (
              <Link
                href={`/markers/${marker.id}?view=${response.kind}&from=${response.number}`}
                className="link"
                aria-label={`Take up response ${response.number} again`}
              >
                Take up again
              </Link>
            ) : null,
        },
      ]}
    />
  )
}
