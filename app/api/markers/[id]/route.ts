import { route } from '@/lib/http/route'
import { getMarker } from '@/lib/markers/get-marker'
import { operations } from '@/lib/markers/operations'

export const GET = route(operations.getMarker, (actor, { params }) => getMarker(actor, params))
