import { addPhoto } from '@/lib/firings/add-photo'
import { listPhotos } from '@/lib/firings/list-photos'
import { operations } from '@/lib/firings/photo-operations'
import { readPhotoBody } from '@/lib/http/read-photo-body'
import { route } from '@/lib/http/route'

export const GET = route(operations.listPhotos, (actor, { params }) => listPhotos(actor, params))
export const POST = route(operations.addPhoto, async (actor, { params, query, request }) =>
  addPhoto(actor, { ...query, firingId: params.id, bytes: await readPhotoBody(request) }),
)
