import { getMe } from '@/lib/accounts/get-me'
import { operations } from '@/lib/accounts/operations'
import { updatePreferences } from '@/lib/accounts/update-preferences'
import { route } from '@/lib/http/route'

export const GET = route(operations.getMe, (actor) => getMe(actor))
export const PUT = route(operations.updatePreferences, (actor, call) => updatePreferences(actor, call.body))
