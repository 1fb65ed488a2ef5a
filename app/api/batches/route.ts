import { createBatch } from '@/lib/batches/create-batch'
import { listBatches } from '@/lib/batches/list-batches'
import { operations } from '@/lib/batches/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.listBatches, (actor, { query }) => listBatches(actor, query))
export const POST = route(operations.createBatch, (actor, { body }) => createBatch(actor, body))
