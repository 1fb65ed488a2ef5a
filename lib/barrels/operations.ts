import * as z from 'zod'
import { rolesWith } from '@/lib/auth/permissions'
import { addLossSchema, lossListSchema, lossSchema, removeLossSchema } from '@/lib/barrels/schema'
import { defineOperation } from '@/lib/http/operation'

const idParams = z.object({ id: z.uuid() })
const tag = 'barrels'
const run = rolesWith('firings:run trial')

export const operations = {
  listLosses: defineOperation({
    id: 'listLosses',
    method: 'GET',
    path: '/api/barrels/{id}/losses',
    summary: 'Losses of a barrel or head by stave: broken at the pull, blister, leak, stave replaced',
    tag,
    access: rolesWith('batches:read all'),
    atDevice: 'by pin',
    params: idParams,
    response: lossListSchema,
  }),
  addLoss: defineOperation({
    id: 'addLoss',
    method: 'POST',
    path: '/api/barrels/{id}/losses',
    summary: 'Note a loss, or put one right; the same id again changes nothing',
    tag,
    access: run,
    atDevice: 'by pin',
    params: idParams,
    body: addLossSchema,
    response: lossSchema,
    status: 201,
  }),
  removeLoss: defineOperation({
    id: 'removeLoss',
    method: 'POST',
    path: '/api/losses/{id}/remove',
    summary: 'Take a loss back with a reason; both stay on record',
    tag,
    access: run,
    atDevice: 'by pin',
    params: idParams,
    body: removeLossSchema,
    response: lossSchema,
  }),
}
