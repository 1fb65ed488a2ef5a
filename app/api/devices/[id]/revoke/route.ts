import { operations } from '@/lib/devices/operations'
import { revokeDevice } from '@/lib/devices/revoke-device'
import { route } from '@/lib/http/route'

export const POST = route(operations.revokeDevice, (actor, { params }) => revokeDevice(actor, params))
