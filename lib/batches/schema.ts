import * as z from 'zod'
import { firingStates } from '@/lib/live/events'
import { pageQuery, pageSchema } from '@/lib/http/cursor'
import { pieceKinds } from '@/lib/recipes/schema'

export const createBatchSchema = z.strictObject({
  customerId: z.uuid('Choose a customer.'),
  recipeVersionId: z.uuid('Choose an approved recipe version.'),
  pieceCount: z
    .number('Give a number.')
    .int('Give a whole number.')
    .min(1, 'At least 1.')
    .max(400, 'At most 400.'),
  woodLot: z.string('Name the wood lot.').trim().min(1, 'Name the wood lot.').max(60, 'At most 60 letters.'),
  /** ISO week, 2027-W05. */
  dueWeek: z
    .string()
    .regex(/^\d{4}-W(0[1-9]|[1-4]\d|5[0-3])$/, 'Write the week as 2027-W05.')
    .nullable()
    .default(null),
  notes: z.string().trim().max(2000, 'At most 2,000 letters.').default(''),
})

export const batchSchema = z.object({
  id: z.uuid(),
  number: z.number().int(),
  customer: z.object({ id: z.uuid(), name: z.string() }),
  recipeVersionId: z.uuid(),
  recipeName: z.string(),
  versionNumber: z.number().int(),
  pieceKind: z.enum(pieceKinds),
  sizeAndShape: z.string(),
  pieceCount: z.number().int(),
  waitingCount: z.number().int(),
  liveCount: z.number().int(),
  finishedCount: z.number().int(),
  woodLot: z.string(),
  dueWeek: z.string().nullable(),
  notes: z.string(),
  createdAt: z.iso.datetime(),
})
export type BatchDto = z.infer<typeof batchSchema>

export const listBatchesQuery = z.strictObject({
  ...pageQuery,
  q: z.string().trim().max(80).optional(),
  customerId: z.uuid().optional(),
  recipeId: z.uuid().optional(),
})
export const batchPageSchema = pageSchema(batchSchema)

export const pieceSchema = z.object({
  id: z.uuid(),
  kind: z.enum(pieceKinds),
  serial: z.string(),
  position: z.number().int(),
  batch: z.object({
    id: z.uuid(),
    number: z.number().int(),
    pieceCount: z.number().int(),
    woodLot: z.string(),
  }),
  customer: z.object({ id: z.uuid(), name: z.string() }),
  recipe: z.object({ versionId: z.uuid(), name: z.string(), versionNumber: z.number().int() }),
  sizeAndShape: z.string(),
  /** The newest firing of this piece. */
  firing: z
    .object({
      id: z.uuid(),
      state: z.enum(firingStates),
      verdict: z.string().nullable(),
      points: z.number().nullable(),
      doseMinutes: z.number().nullable(),
      doseLowMinutes: z.number().nullable(),
      doseHighMinutes: z.number().nullable(),
    })
    .nullable(),
  /** How often it was over a fire before, finished or abandoned. */
  firedCount: z.number().int(),
  isWaiting: z.boolean(),
})
export type PieceDto = z.infer<typeof pieceSchema>

export const listPiecesQuery = z.strictObject({
  ...pageQuery,
  q: z.string().trim().max(80).optional(),
  batchId: z.uuid().optional(),
  kind: z.enum(pieceKinds).optional(),
  /** waiting: not fired yet, in the queue's order; fired: with a finished firing; again: whose last firing is over. */
  show: z.enum(['all', 'waiting', 'fired', 'again']).default('all'),
})
export const piecePageSchema = pageSchema(pieceSchema)
