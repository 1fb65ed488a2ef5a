import { makeDeviceCode } from '@/lib/devices/make-device-code'
import { operations } from '@/lib/devices/operations'
import { route } from '@/lib/http/route'

export const POST = route(operations.makeDeviceCode, (actor, { params }) => makeDeviceCode(actor, params))
