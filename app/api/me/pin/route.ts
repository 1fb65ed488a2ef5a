import { getPin } from '@/lib/accounts/get-pin'
import { operations } from '@/lib/accounts/operations'
import { removePin } from '@/lib/accounts/remove-pin'
import { setPin } from '@/lib/accounts/set-pin'
import { route } from '@/lib/http/route'

export const GET = route(operations.getPin, (actor) => getPin(actor))
export const PUT = route(operations.setPin, (actor, { body }) => setPin(actor, body))
export const DELETE = route(operations.removePin, (actor) => removePin(actor))
