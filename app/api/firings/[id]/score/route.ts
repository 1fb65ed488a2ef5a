import { getScore } from '@/lib/firings/get-score'
import { operations } from '@/lib/firings/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.getScore, (actor, { params }) => getScore(actor, params))
