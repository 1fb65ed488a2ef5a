import { route } from '@/lib/http/route'
import { listStudies } from '@/lib/probes/list-studies'
import { startStudy } from '@/lib/probes/start-study'
import { operations } from '@/lib/probes/study-operations'

export const GET = route(operations.listStudies, (actor, { query }) => listStudies(actor, query))
export const POST = route(operations.startStudy, (actor, { body }) => startStudy(actor, body))
