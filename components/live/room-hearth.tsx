'use client'

import { useMemo } from 'react'
import useSWR from 'swr'
import type * as z from 'zod'
import type { TemperatureUnit } from '@/lib/format'
import type { FiringDto, firingReadingsSchema } from '@/lib/firings/schema'
import { apiPath, getApi } from '@/lib/http/api-client'
import type { RoomFiring } from '@/lib/live/events'
import type { HearthDto } from '@/lib/probes/schema'
import type { SiteRules } from '@/lib/science/site-rules'
import { isCut, isFarFromPlan, readProbe } from './fireside-reading'
import { roomPair, roomPlanOf } from './room-pair'
import { RoomRow } from './room-row'
import { roomEdge, roomTime } from './room-view'

const CURVE_POINTS = 240
const CURVE_EVERY_MS = 10_000

/** One live hearth: fetches its firing and curve; the figures come with the room's states. */
export function RoomHearth({
  hearthNumber,
  live,
  firing,
  rules,
  unit,
  isTight,
  nowMs,
}: {
  hearthNumber: number
  live: NonNullable<HearthDto['live']>
  /** The newest state of this firing, or null before the first. */
  firing: RoomFiring | null
  rules: SiteRules
  unit: TemperatureUnit
  isTight: boolean
  nowMs: number
}) {
  const params = { id: live.firingId }
  const revision = firing?.revision ?? 0
  const detail = useSWR(
    [apiPath('/api/firings/{id}', params), revision],
    ([path]) => getApi<FiringDto>(path),
    {
      keepPreviousData: true,
    },
  )
  const readings = useSWR(
    apiPath('/api/firings/{id}/readings', params, { points: CURVE_POINTS }),
    getApi<z.infer<typeof firingReadingsSchema>>,
    { refreshInterval: CURVE_EVERY_MS, keepPreviousData: true },
  )
  const plan = useMemo(
    () => (detail.data === undefined ? null : roomPlanOf(detail.data, rules)),
    [detail.data, rules],
  )
  const lead = readings.data?.series.find((series) => series.role === 'lead') ?? null
  const pair = useMemo(() => {
    if (detail.data === undefined || plan === null) return null
    const curve = detail.data.toastAt === null ? null : lead
    return roomPair(detail.data, plan, curve, curve === null ? null : (lead?.timeS.at(-1) ?? 0), {
      rules,
      unit,
    })
  }, [detail.data, plan, lead, rules, unit])
  const reading = readProbe(firing, 'lead', nowMs)
  const isKnownNow = firing === null || reading.kind === 'live' || firing.state === 'preheating'
  const isFar =
    firing !== null &&
    plan !== null &&
    firing.state === 'toasting' &&
    !isCut(firing, nowMs) &&
    isFarFromPlan(firing, plan)
  return (
    <RoomRow
      hearthNumber={hearthNumber}
      firingId={live.firingId}
      serial={live.serial}
      recipeName={live.recipeName}
      pair={pair}
      firing={firing}
      lead={reading}
      isFar={isFar}
      edge={roomEdge(firing, isFar, isKnownNow)}
      time={firing === null ? null : roomTime(firing, nowMs)}
      isTight={isTight}
      unit={unit}
    />
  )
}
