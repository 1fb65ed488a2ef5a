import { listPieces } from '@/lib/batches/list-pieces'
import { operations } from '@/lib/batches/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.listPieces, (actor, { query }) => listPieces(actor, query))
