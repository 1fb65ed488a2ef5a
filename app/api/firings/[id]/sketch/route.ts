import { getRoomPicture } from '@/lib/firings/get-room-picture'
import { operations } from '@/lib/firings/operations'
import { roomRoute } from '@/lib/http/route'

export const GET = roomRoute(operations.getRoomPicture, (actor, { params }) => getRoomPicture(actor, params))
