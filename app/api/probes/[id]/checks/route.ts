import { route } from '@/lib/http/route'
import { operations } from '@/lib/probes/operations'
import { recordProbeCheck } from '@/lib/probes/record-probe-check'

export const POST = route(operations.recordProbeCheck, (actor, { params, body }) =>
  recordProbeCheck(actor, { ...body, probeId: params.id }),
)
