import { roomRoute, route } from '@/lib/http/route'
import { listHearths } from '@/lib/probes/list-hearths'
import { operations } from '@/lib/probes/operations'
import { saveHearth } from '@/lib/probes/save-hearth'

export const GET = roomRoute(operations.listHearths, (actor) => listHearths(actor))
export const POST = route(operations.createHearth, (actor, { body }) => saveHearth(actor, body))
