'use client'

import useSWR from 'swr'
import type { Sketch } from '@/lib/firings/sketch'
import type { TemperatureUnit } from '@/lib/format'
import { apiPath, getApi } from '@/lib/http/api-client'
import type { RoomFiring } from '@/lib/live/events'
import type { HearthDto } from '@/lib/probes/schema'
import { isCut, readProbe } from './fireside-reading'
import { RoomRow } from './room-row'
import type { RoomSize } from './room-size'
import { roomEdge, roomTime } from './room-view'

const PICTURE_EVERY_MS = 10_000

/** One live hearth: fetches its picture; the figures come with the room's states. */
export function RoomHearth({
  hearthNumber,
  live,
  firing,
  unit,
  size,
  nowMs,
}: {
  hearthNumber: number
  live: NonNullable<HearthDto['live']>
  /** The newest state of this firing, or null before the first. */
  firing: RoomFiring | null
  unit: TemperatureUnit
  size: RoomSize
  nowMs: number
}) {
  const path = apiPath('/api/firings/{id}/sketch', { id: live.firingId })
  // A phase or a mark changes what is drawn, and is asked for at once.
  const picture = useSWR(
    [path, firing?.revision ?? 0],
    ([address]) => getApi<{ sketch: Sketch | null }>(address),
    { refreshInterval: PICTURE_EVERY_MS, keepPreviousData: true },
  )
  const reading = readProbe(firing, 'lead', nowMs)
  const isKnownNow = firing === null || reading.kind === 'live' || firing.state === 'preheating'
  const isFar = firing !== null && firing.isFarFromPlan && !isCut(firing, nowMs)
  return (
    <RoomRow
      hearthNumber={hearthNumber}
      firingId={live.firingId}
      serial={live.serial}
      recipeName={live.recipeName}
      sketch={picture.data?.sketch ?? null}
      firing={firing}
      lead={reading}
      isFar={isFar}
      edge={roomEdge(firing, isFar, isKnownNow)}
      time={firing === null ? null : roomTime(firing, nowMs)}
      size={size}
      unit={unit}
    />
  )
}
