import { route } from '@/lib/http/route'
import { listProbes } from '@/lib/probes/list-probes'
import { operations } from '@/lib/probes/operations'
import { saveProbe } from '@/lib/probes/save-probe'

export const GET = route(operations.listProbes, (actor, { query }) => listProbes(actor, query))
export const POST = route(operations.createProbe, (actor, { body }) => saveProbe(actor, body))
