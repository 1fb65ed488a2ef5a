'use client'

import useSWR from 'swr'
import { apiPath, getApi } from '@/lib/http/api-client'
import type { RecentReadingsDto } from '@/lib/probes/schema'
import type { Settling, SettlingRule } from '@/lib/science/stability'
import { settlingOf } from '@/lib/science/stability'

const everyMs = 1_000
const seconds = 150

export type RecentReadings = {
  /** Null until the first answer. */
  readings: RecentReadingsDto | null
  settling: Settling | null
  /** The server does not answer: what is shown is not of now. */
  isCut: boolean
}

/** What a probe says, asked for every second while it is wanted, and whether it has settled. */
export function useRecentReadings(probeId: string, rule: SettlingRule, isWanted: boolean): RecentReadings {
  const path = apiPath('/api/probes/{id}/recent-readings', { id: probeId }, { seconds })
  const { data, error } = useSWR(isWanted ? path : null, getApi<RecentReadingsDto>, {
    refreshInterval: everyMs,
    // While the server is away the same question is asked again each second, not ever more seldom.
    onErrorRetry: (_error, _key, _config, revalidate, { retryCount }) => {
      setTimeout(() => void revalidate({ retryCount }), everyMs)
    },
    dedupingInterval: everyMs / 2,
  })
  const readings = data ?? null
  return {
    readings,
    settling: readings === null ? null : settlingOfReadings(readings, rule),
    isCut: error !== undefined,
  }
}

export function settlingOfReadings({ nowMs, atMs, tempC }: RecentReadingsDto, rule: SettlingRule): Settling {
  const timeS = atMs.map((at) => (at - nowMs) / 1000)
  // Readings of a clock that stands a little ahead are of now.
  const nowS = Math.max(0, timeS.at(-1) ?? 0)
  return settlingOf(
    timeS,
    tempC.map((one) => one ?? NaN),
    nowS,
    rule,
  )
}
