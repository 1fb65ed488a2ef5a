'use client'

import { useState } from 'react'
import useSWR from 'swr'
import type { PieceDto } from '@/lib/batches/schema'
import { formatClock, formatCount, formatInstant } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { apiPath, getApi } from '@/lib/http/api-client'
import type { Page } from '@/lib/http/cursor'
import type { HearthDto } from '@/lib/probes/schema'
import type { SiteRules } from '@/lib/science/site-rules'
import { createServerClock, useServerTime } from './fireside-clock'
import { CUT_AFTER_MS } from './fireside-reading'
import { RoomFreeRow } from './room-free-row'
import { RoomHearth } from './room-hearth'
import { RoomScreen } from './room-screen'
import type { LiveRoomSnapshot } from './live-room-client'
import { refusalOf } from './use-fireside-live'
import { useRoomLive } from './use-room-live'

export type RoomBoardProps = {
  hearths: HearthDto[]
  queue: Page<PieceDto>
  rules: SiteRules
  siteName: string
  zone: string
  unit: TemperatureUnit
  canFire: boolean
  deskHref: string
  serverNowMs: number
}

const queuePath = apiPath('/api/barrels', {}, { show: 'waiting', limit: 200 })
/** Five rows and more are low: the figures are a little smaller. */
const TIGHT_FROM = 5

/** The whole room: fetches hearths and queue, follows the live states; the rows draw. */
export function RoomBoard(props: RoomBoardProps) {
  const [clock] = useState(() => createServerClock(props.serverNowMs))
  const hearths = useSWR('/api/hearths', getApi<{ items: HearthDto[] }>, {
    fallbackData: { items: props.hearths },
    revalidateOnMount: false,
  })
  const queue = useSWR(queuePath, getApi<Page<PieceDto>>, {
    fallbackData: props.queue,
    revalidateOnMount: false,
    refreshInterval: 60_000,
  })
  const live = useRoomLive(clock, () => {
    void hearths.mutate()
    void queue.mutate()
  })
  const nowMs = useServerTime(clock, props.serverNowMs)
  const inUse = (hearths.data?.items ?? props.hearths).filter((hearth) => hearth.isActive)
  const waiting = queue.data ?? props.queue
  const isTight = inUse.length >= TIGHT_FROM
  return (
    <RoomScreen
      siteName={props.siteName}
      queueWords={queueWords(waiting)}
      clock={formatInstant(nowMs, props.zone, 'time')}
      deskHref={props.deskHref}
      problem={problemWords(live, nowMs, props.zone)}
      rows={inUse.length}
    >
      {inUse.length === 0 ? (
        <p className="px-6 py-8 text-[30px]">
          No hearth is in use. An administrator sets hearths up on the page Probes.
        </p>
      ) : null}
      {inUse.map((hearth) => {
        if (hearth.live === null) {
          const next = waiting.items[0] ?? null
          return (
            <RoomFreeRow
              key={hearth.id}
              hearthNumber={hearth.number}
              next={next}
              canFire={props.canFire}
              isTight={isTight}
            />
          )
        }
        const { firingId } = hearth.live
        return (
          <RoomHearth
            key={firingId}
            hearthNumber={hearth.number}
            live={hearth.live}
            firing={live.room?.firings.find((one) => one.firingId === firingId) ?? null}
            rules={props.rules}
            unit={props.unit}
            isTight={isTight}
            nowMs={nowMs}
          />
        )
      })}
    </RoomScreen>
  )
}

function queueWords({ items, nextCursor }: Page<PieceDto>): string {
  const [next] = items
  if (next === undefined) return 'No rose waits'
  const count = nextCursor === null ? formatCount(items.length, 'rose') : `over ${items.length} roses`
  return `${count} waiting, next ${next.serial}`
}

function problemWords(live: LiveRoomSnapshot, nowMs: number, zone: string): string | null {
  const refusal = refusalOf(live.connection)
  if (refusal !== null) return `Not connected. ${refusal}`
  const atMs = live.room?.atMs ?? null
  if (atMs === null || nowMs - atMs <= CUT_AFTER_MS) return null
  const since = formatInstant(atMs, zone, 'seconds')
  return `No connection since ${since}, ${formatClock((nowMs - atMs) / 1000)} ago. The figures are from then.`
}
