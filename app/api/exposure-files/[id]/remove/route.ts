import { operations } from '@/lib/conditions/operations'
import { removeExposureFile } from '@/lib/conditions/remove-exposure-file'
import { route } from '@/lib/http/route'

export const POST = route(operations.removeExposureFile, (actor, { params, body }) =>
  removeExposureFile(actor, { ...body, ...params }),
)
