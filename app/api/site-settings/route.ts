import { route } from '@/lib/http/route'
import { getSiteSettings } from '@/lib/site/get-site-settings'
import { operations } from '@/lib/site/operations'
import { updateSiteSettings } from '@/lib/site/update-site-settings'

export const GET = route(operations.getSiteSettings, (actor) => getSiteSettings(actor))
export const PUT = route(operations.updateSiteSettings, (actor, call) => updateSiteSettings(actor, call.body))
