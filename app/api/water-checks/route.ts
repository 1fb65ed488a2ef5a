import { route } from '@/lib/http/route'
import { listWaterChecks } from '@/lib/probes/list-water-checks'
import { operations } from '@/lib/probes/operations'
import { recordWaterCheck } from '@/lib/probes/record-water-check'

export const GET = route(operations.listWaterChecks, (actor, { query }) => listWaterChecks(actor, query))
export const POST = route(operations.recordWaterCheck, (actor, { body }) => recordWaterCheck(actor, body))
