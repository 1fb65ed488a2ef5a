import { route } from '@/lib/http/route'
import { finishStudy } from '@/lib/probes/finish-study'
import { operations } from '@/lib/probes/study-operations'

export const POST = route(operations.finishStudy, (actor, { params, body }) =>
  finishStudy(actor, { ...body, id: params.id }),
)
