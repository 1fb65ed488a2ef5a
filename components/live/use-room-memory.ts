'use client'

import useSWR from 'swr'
import { nextPieceWords } from '@/lib/firings/next-piece-words'
import type { ForecastRecordDto, NextPieceLine } from '@/lib/firings/schema'
import { formatNumber } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { apiPath, getApi } from '@/lib/http/api-client'

/** A line from the last firings like this piece's; null when there is nothing to say, or it is not known yet. */
export function useNextPieceLine(pieceId: string | null, unit: TemperatureUnit): string | null {
  const path = pieceId === null ? null : apiPath('/api/barrels/{id}/next-line', { id: pieceId })
  const { data } = useSWR(path, getApi<{ line: NextPieceLine | null }>, { revalidateOnFocus: false })
  return data === undefined || data.line === null ? null : nextPieceWords(data.line, unit)
}

/** "Last 30: within 1.5 min, 24 times (61 to 92 %)."; null while too few can be told. */
export function useForecastRecord(): string | null {
  const { data } = useSWR('/api/forecast-record', getApi<{ record: ForecastRecordDto | null }>, {
    revalidateOnFocus: false,
  })
  return data === undefined || data.record === null ? null : recordWords(data.record)
}

export function recordWords(record: ForecastRecordDto): string {
  const [low, high] = [record.shareLow, record.shareHigh].map((share) => formatNumber(100 * share))
  const within = formatNumber(record.withinMinutes, 1)
  return `Last ${record.n}: within ${within} min, ${record.rightCount} times (${low} to ${high} %).`
}
