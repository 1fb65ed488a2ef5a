import * as z from 'zod'
import { rolesWith } from '@/lib/auth/permissions'
import {
  batchPageSchema,
  batchSchema,
  createBatchSchema,
  listBatchesQuery,
  listPiecesQuery,
  piecePageSchema,
  pieceSchema,
} from '@/lib/batches/schema'
import { defineOperation } from '@/lib/http/operation'

const idParams = z.object({ id: z.uuid() })

export const operations = {
  listBatches: defineOperation({
    id: 'listBatches',
    method: 'GET',
    path: '/api/batches',
    summary: 'Batches, newest first; a customer gets their own',
    tag: 'batches',
    access: rolesWith('batches:read'),
    query: listBatchesQuery,
    response: batchPageSchema,
  }),
  createBatch: defineOperation({
    id: 'createBatch',
    method: 'POST',
    path: '/api/batches',
    summary: 'Make a batch of pieces from an approved version; each piece joins the queue',
    tag: 'batches',
    access: rolesWith('batches:write'),
    body: createBatchSchema,
    response: batchSchema,
    status: 201,
  }),
  getBatch: defineOperation({
    id: 'getBatch',
    method: 'GET',
    path: '/api/batches/{id}',
    summary: 'One batch',
    tag: 'batches',
    access: rolesWith('batches:read'),
    params: idParams,
    response: batchSchema,
  }),
  listPieces: defineOperation({
    id: 'listPieces',
    method: 'GET',
    path: '/api/barrels',
    summary: 'Barrels and heads; show=waiting is the queue of roses in its order',
    tag: 'batches',
    access: rolesWith('batches:read'),
    atDevice: 'alone',
    query: listPiecesQuery,
    response: piecePageSchema,
  }),
  getPiece: defineOperation({
    id: 'getPiece',
    method: 'GET',
    path: '/api/barrels/{id}',
    summary: 'One barrel or head',
    tag: 'batches',
    access: rolesWith('batches:read'),
    params: idParams,
    response: pieceSchema,
  }),
}
