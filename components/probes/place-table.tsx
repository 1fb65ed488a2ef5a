import Link from 'next/link'
import { hearthWords, placeWords } from '@/components/probes/place-words'
import { Table } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import type { ProbePlaceDto } from '@/lib/probes/schema'

/** Where a probe is and was; a firing keeps the place it had then. */
export function PlaceTable({ places, zone }: { places: readonly ProbePlaceDto[]; zone: string }) {
  return (
    <Table
      caption="Where it was"
      rows={places}
      rowKey={(place) => place.fromAt}
      columns={[
        {
          key: 'from',
          head: 'From',
          isRowHead: true,
          cell: (place) => <Time at={place.fromAt} zone={zone} />,
        },
        {
          key: 'until',
          head: 'Until',
          cell: (place) => (place.untilAt === null ? 'now' : <Time at={place.untilAt} zone={zone} />),
        },
        { key: 'place', head: 'Place', cell: placeWords },
        { key: 'hearth', head: 'Hearth', cell: (place) => hearthWords(place.hearthNumber, place.usualRole) },
        {
          key: 'gateway',
          head: 'Gateway',
          cell: (place) => (
            <>
              <Link className="link" href={`/probes/gateways/${place.gateway.id}`}>
                {place.gateway.name}
              </Link>
              , channel {place.channel}
            </>
          ),
        },
        { key: 'by', head: 'Put there by', cell: (place) => place.changedBy ?? 'the set-up' },
      ]}
    />
  )
}
