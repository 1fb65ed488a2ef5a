import Link from 'next/link'
import { placeWords } from '@/components/probes/place-words'
import { Table } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import type { ProbeFiringDto } from '@/lib/probes/schema'

/** The firings that a probe read, with the place that it had then. */
export function ProbeFiringTable({ firings, zone }: { firings: readonly ProbeFiringDto[]; zone: string }) {
  return (
    <Table
      caption="Firings that it read"
      rows={firings}
      rowKey={(firing) => `${firing.firingId} ${firing.fromAt}`}
      empty={<p className="border-y border-line py-3 text-soft">None, as far as you may see firings.</p>}
      columns={[
        {
          key: 'from',
          head: 'From',
          isRowHead: true,
          cell: (firing) => <Time at={firing.fromAt} zone={zone} />,
        },
        {
          key: 'until',
          head: 'Until',
          cell: (firing) =>
            firing.untilAt === null ? 'reads it now' : <Time at={firing.untilAt} zone={zone} style="time" />,
        },
        {
          key: 'firing',
          head: 'Firing',
          cell: (firing) => (
            <Link className="link" href={`/firings/${firing.firingId}`}>
              {firing.serial}
            </Link>
          ),
        },
        {
          key: 'recipe',
          head: 'Recipe',
          cell: (firing) => `${firing.recipeName}, version ${firing.versionNumber}`,
        },
        { key: 'role', head: 'As', cell: (firing) => firing.role },
        { key: 'place', head: 'Its place then', cell: (firing) => placeWords(firing.place) },
      ]}
    />
  )
}
