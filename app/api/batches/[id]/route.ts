import { getBatch } from '@/lib/batches/get-batch'
import { operations } from '@/lib/batches/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.getBatch, (actor, { params }) => getBatch(actor, params))
