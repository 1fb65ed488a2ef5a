import { route } from '@/lib/http/route'
import { listMarkers } from '@/lib/markers/list-markers'
import { operations } from '@/lib/markers/operations'

export const GET = route(operations.listMarkers, (actor) => listMarkers(actor))
