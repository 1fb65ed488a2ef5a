import { operations } from '@/lib/devices/operations'
import { updateDevice } from '@/lib/devices/update-device'
import { route } from '@/lib/http/route'

export const PUT = route(operations.updateDevice, (actor, { params, body }) =>
  updateDevice(actor, { ...body, id: params.id }),
)
