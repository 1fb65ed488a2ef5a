import { operations } from '@/lib/conditions/operations'
import { uploadExposureFile } from '@/lib/conditions/upload-exposure-file'
import { route } from '@/lib/http/route'

export const POST = route(operations.uploadExposureFile, (actor, { body }) => uploadExposureFile(actor, body))
