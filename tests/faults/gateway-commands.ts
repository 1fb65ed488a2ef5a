import * as z from 'zod'

/** What the parent tells a gateway of the faults suite over its channel. */
export const gatewayCommandSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('batches'), order: z.enum(['as they are', 'doubled', 'reordered', 'late']) }),
  z.object({ kind: z.literal('disk'), isFull: z.boolean(), delayMs: z.number() }),
  z.object({ kind: z.literal('clock'), aheadMs: z.number() }),
])
export type GatewayCommand = z.infer<typeof gatewayCommandSchema>

export const gatewayTaskSchema = z.object({
  serverUrl: z.url(),
  spoolFolder: z.string(),
  tokenFile: z.string(),
  logPath: z.string(),
  probeIds: z.array(z.uuid()).min(1),
  intervalMs: z.number(),
  /** How far the box's clock is ahead of the truth. */
  clockAheadMs: z.number(),
  seed: z.number(),
})
export type GatewayTask = z.infer<typeof gatewayTaskSchema>

/** Where the child finds its task. */
export const taskVariable = 'FAULTS_GATEWAY_TASK'
