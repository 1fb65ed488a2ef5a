import { getFiring } from '@/lib/firings/get-firing'
import { operations } from '@/lib/firings/operations'
import { roomRoute } from '@/lib/http/route'

export const GET = roomRoute(operations.getFiring, (actor, { params }) => getFiring(actor, params))
