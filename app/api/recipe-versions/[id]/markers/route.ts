import { route } from '@/lib/http/route'
import { operations } from '@/lib/markers/operations'
import { predictMarkers } from '@/lib/markers/predict-markers'

export const GET = route(operations.predictMarkers, (actor, { params, query }) =>
  predictMarkers(actor, { id: params.id, lot: query.lot }),
)
