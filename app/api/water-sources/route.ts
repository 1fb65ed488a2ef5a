import { route } from '@/lib/http/route'
import { listWaterSources } from '@/lib/probes/list-water-sources'
import { operations } from '@/lib/probes/operations'

export const GET = route(operations.listWaterSources, (actor) => listWaterSources(actor))
