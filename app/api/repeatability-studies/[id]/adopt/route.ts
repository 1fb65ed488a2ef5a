import { route } from '@/lib/http/route'
import { adoptStudy } from '@/lib/probes/adopt-study'
import { operations } from '@/lib/probes/study-operations'

export const POST = route(operations.adoptStudy, (actor, { params, body }) =>
  adoptStudy(actor, { ...body, id: params.id }),
)
