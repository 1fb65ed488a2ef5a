import { route } from '@/lib/http/route'
import { operations } from '@/lib/recipes/operations'
import { sendForReview } from '@/lib/recipes/send-for-review'

export const POST = route(operations.sendForReview, (actor, { params, body }) =>
  sendForReview(actor, { ...body, id: params.id }),
)
