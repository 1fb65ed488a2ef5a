import { route } from '@/lib/http/route'
import { getStudy } from '@/lib/probes/get-study'
import { operations } from '@/lib/probes/study-operations'

export const GET = route(operations.getStudy, (actor, { params }) => getStudy(actor, params))
