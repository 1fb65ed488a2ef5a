'use client'

import { useState } from 'react'
import useSWR from 'swr'
import type { PieceDto } from '@/lib/batches/schema'
import { formatClock, formatCount, formatInstant } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { apiPath, getApi } from '@/lib/http/api-client'
import type { Page } from '@/lib/http/cursor'
import type { HearthDto } from '@/lib/probes/schema'
import { createServerClock, useServerTime } from './fireside-clock'
import { CUT_AFTER_MS } from './fireside-reading'
import type { AtTheFire } from './device-view'
import { RoomCorner } from './room-corner'
import { RoomFreeRow } from './room-free-row'
import { RoomHearth } from './room-hearth'
import { RoomKeptMarks } from './room-kept-marks'
import { RoomScreen } from './room-screen'
import { roomSizeOf } from './room-size'
import type { LiveRoomSnapshot } from './live-room-client'
import { refusalOf } from './use-fireside-live'
import { useKeepAwake } from './use-keep-awake'
import { useRoomLive } from './use-room-live'
import { useRoomScan } from './use-room-scan'
import { useWallZoom } from './use-wall-zoom'

export type RoomBoardProps = {
  hearths: HearthDto[]
  queue: Page<PieceDto>
  siteName: string
  zone: string
  unit: TemperatureUnit
  canFire: boolean
  deskHref: string
  /** A screen that nobody touches: larger, without controls, kept awake. */
  isWall?: boolean
  serverNowMs: number
} & AtTheFire

const queuePath = apiPath('/api/barrels', {}, { show: 'waiting', limit: 200 })

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
  const { isWall = false, person, device, canFire } = props
  const scan = useRoomScan(inUse, waiting.items, { canFire, ownHearth: device?.hearthNumber ?? null })
  const size = roomSizeOf(inUse.length, isWall)
  const zoom = useWallZoom()
  useKeepAwake(isWall)
  const screen = (
    <RoomScreen
      siteName={props.siteName}
      queueWords={queueWords(waiting)}
      clock={formatInstant(nowMs, props.zone, 'time')}
      deskHref={isWall ? null : props.deskHref}
      corner={device === null || isWall ? null : <RoomCorner person={person} device={device} />}
      notices={
        isWall ? null : (
          <>
            <RoomKeptMarks person={person} zone={props.zone} />
            {scan.words === null ? null : (
              <p role="status" className="border-b border-line bg-raised px-6 py-3 text-[28px] leading-tight">
                {scan.words}
              </p>
            )}
          </>
        )
      }
      height={isWall ? `calc(100dvh / ${zoom})` : undefined}
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
          const next = scan.piece ?? waiting.items[0] ?? null
          return (
            <RoomFreeRow
              key={hearth.id}
              hearthNumber={hearth.number}
              next={next}
              canFire={canFire}
              isScanned={scan.piece !== null}
              size={size}
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
            unit={props.unit}
            size={size}
            nowMs={nowMs}
          />
        )
      })}
    </RoomScreen>
  )
  return isWall ? <div style={{ zoom }}>{screen}</div> : screen
}

function queueWords({ items, nextCursor }: Page<PieceDto>): string {
  const [next] = items
  if (next === undefined) return 'Nothing waits'
  const what = items.some((piece) => piece.kind === 'head') ? 'piece' : 'rose'
  const count = nextCursor === null ? formatCount(items.length, what) : `over ${items.length} ${what}s`
  return `${count} waiting, next ${next.serial}`
}

function problemWords(live: LiveRoomSnapshot, nowMs: number, zone: string): string | null {
  const refusal = refusalOf(live.connection)
  if (refusal !== null) return `Not connected. ${refusal}`
  const atMs = live.room?.atMs ?? null
  if (atMs === null || nowMs - atMs <= CUT_AFTER_MS) return null
  const since = formatInstant(atMs, zone, 'seconds')
  return `As of ${since}, ${formatClock((nowMs - atMs) / 1000)} ago. Not live: no connection.`
}
