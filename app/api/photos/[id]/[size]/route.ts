import { openPhoto } from '@/lib/firings/open-photo'
import { operations } from '@/lib/firings/photo-operations'
import { photoResponse } from '@/lib/http/photo-response'
import { route } from '@/lib/http/route'

export const GET = route(operations.openPhoto, async (actor, { params }) =>
  photoResponse(await openPhoto(actor, params)),
)
