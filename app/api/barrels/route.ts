import { listPieces } from '@/lib/batches/list-pieces'
import { operations } from '@/lib/batches/operations'
import { roomRoute } from '@/lib/http/route'

export const GET = roomRoute(operations.listPieces, (actor, { query }) => listPieces(actor, query))
