import { operations } from '@/lib/conditions/operations'
import { previewExposureFile } from '@/lib/conditions/preview-exposure-file'
import { route } from '@/lib/http/route'

export const POST = route(operations.previewExposureFile, (actor, { body }) =>
  previewExposureFile(actor, body),
)
