import { route } from '@/lib/http/route'
import { abandonStudy } from '@/lib/probes/abandon-study'
import { operations } from '@/lib/probes/study-operations'

export const POST = route(operations.abandonStudy, (actor, { params, body }) =>
  abandonStudy(actor, { ...body, id: params.id }),
)
