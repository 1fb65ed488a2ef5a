import { getPiece } from '@/lib/batches/get-piece'
import { operations } from '@/lib/batches/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.getPiece, (actor, { params }) => getPiece(actor, params))
