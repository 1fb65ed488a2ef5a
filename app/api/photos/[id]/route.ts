import { describePhoto } from '@/lib/firings/describe-photo'
import { operations } from '@/lib/firings/photo-operations'
import { route } from '@/lib/http/route'

export const PUT = route(operations.describePhoto, (actor, { params, body }) =>
  describePhoto(actor, { ...body, ...params }),
)
