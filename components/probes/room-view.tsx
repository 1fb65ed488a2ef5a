import type { ReactNode } from 'react'
import { GatewayTable, NewGateway } from '@/components/probes/gateway-table'
import { HearthTable, NewHearth } from '@/components/probes/hearth-table'
import { NewProbe } from '@/components/probes/probe-dialog'
import { ProbeTable } from '@/components/probes/probe-table'
import { NewWaterCheck, WaterTable } from '@/components/probes/water-table'
import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { SearchForm } from '@/components/ui/search-form'
import { changeQuery } from '@/components/ui/url-query'
import { formatCount } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { RoomPicture } from '@/lib/probes/get-room-picture'

/** Everything that reads the room: probes first, since they run out of date; then gateways, hearths, water. */
export function RoomView({
  room,
  values,
  unit,
}: {
  room: RoomPicture
  values: Readonly<Record<string, string>>
  unit: TemperatureUnit
}) {
  const overdue = room.probes.filter((probe) => probe.isCheckDue && probe.usualRole !== 'coals').length
  const hearths = room.hearths.map((hearth) => ({ value: hearth.id, label: String(hearth.number) }))
  return (
    <>
      <PageHead
        title="Probes"
        sub={`What reads the room. Times in ${room.timeZone}.`}
        verdict={
          overdue === 0 ? undefined : (
            <span className="text-amber">{formatCount(overdue, 'check')} overdue</span>
          )
        }
      />
      <div className="space-y-8">
        <Part title="Probes" action={room.mayWrite ? <NewProbe room={room} /> : null}>
          <SearchForm
            action="/probes"
            values={values}
            hint="Name, serial, gateway"
            selects={[
              {
                name: 'hearthId',
                label: 'Hearth',
                options: [{ value: '', label: 'Any' }, ...hearths],
                fallback: '',
              },
            ]}
          />
          <ProbeTable room={room} unit={unit} />
          <Pager
            firstHref={
              values['cursor'] === undefined ? undefined : changeQuery('/probes', values, { cursor: null })
            }
            nextHref={
              room.nextProbeCursor === null
                ? undefined
                : changeQuery('/probes', values, { cursor: room.nextProbeCursor })
            }
          />
        </Part>
        <Part title="Gateways" action={room.mayWrite ? <NewGateway /> : null}>
          <GatewayTable room={room} />
        </Part>
        <Part title="Hearths" action={room.mayWrite ? <NewHearth /> : null}>
          <HearthTable room={room} />
        </Part>
        <Part title="Water" action={room.mayCheck ? <NewWaterCheck /> : null}>
          <WaterTable room={room} />
        </Part>
      </div>
    </>
  )
}

function Part({ title, action, children }: { title: string; action: ReactNode; children: ReactNode }) {
  return (
    <section>
      <div className="mb-2 flex items-end justify-between gap-4">
        <h2>{title}</h2>
        {action}
      </div>
      {children}
    </section>
  )
}
