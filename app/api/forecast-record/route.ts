import { getForecastRecord } from '@/lib/firings/get-forecast-record'
import { operations } from '@/lib/firings/operations'
import { roomRoute } from '@/lib/http/route'

export const GET = roomRoute(operations.getForecastRecord, (actor) => getForecastRecord(actor))
