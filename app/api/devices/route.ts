import { listDevices } from '@/lib/devices/list-devices'
import { makeDevice } from '@/lib/devices/make-device'
import { operations } from '@/lib/devices/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.listDevices, (actor, { query }) => listDevices(actor, query))
export const POST = route(operations.makeDevice, (actor, { body }) => makeDevice(actor, body))
