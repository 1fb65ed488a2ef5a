import { route } from '@/lib/http/route'
import { discardDraft } from '@/lib/recipes/discard-draft'
import { getVersion } from '@/lib/recipes/get-version'
import { operations } from '@/lib/recipes/operations'
import { updateVersion } from '@/lib/recipes/update-version'

export const GET = route(operations.getVersion, (actor, { params }) => getVersion(actor, params))
export const PUT = route(operations.updateVersion, (actor, { params, body }) =>
  updateVersion(actor, { ...body, id: params.id }),
)
export const DELETE = route(operations.discardDraft, (actor, { params }) => discardDraft(actor, params))
