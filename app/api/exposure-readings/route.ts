import { operations } from '@/lib/conditions/operations'
import { recordExposure } from '@/lib/conditions/record-exposure'
import { route } from '@/lib/http/route'

export const POST = route(operations.recordExposure, (actor, { body }) => recordExposure(actor, body))
