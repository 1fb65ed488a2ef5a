import { operations } from '@/lib/firings/photo-operations'
import { removePhoto } from '@/lib/firings/remove-photo'
import { route } from '@/lib/http/route'

export const POST = route(operations.removePhoto, (actor, { params, body }) =>
  removePhoto(actor, { ...body, ...params }),
)
