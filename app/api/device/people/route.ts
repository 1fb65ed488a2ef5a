import { listPinPeople } from '@/lib/devices/list-pin-people'
import { operations } from '@/lib/devices/operations'
import { deviceRoute } from '@/lib/http/route'

export const GET = deviceRoute(operations.listPinPeople, (device) => listPinPeople(device))
