import { getFiring } from '@/lib/firings/get-firing'
import { operations } from '@/lib/firings/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.getFiring, (actor, { params }) => getFiring(actor, params))
