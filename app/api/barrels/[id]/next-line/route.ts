import { getNextPieceLine } from '@/lib/firings/get-next-piece-line'
import { operations } from '@/lib/firings/operations'
import { roomRoute } from '@/lib/http/route'

export const GET = roomRoute(operations.getNextPieceLine, (actor, { params }) =>
  getNextPieceLine(actor, params),
)
