import { performance } from 'node:perf_hooks'
import { io } from 'socket.io-client'
import * as z from 'zod'
import { testOrigin } from '@/tests/support/environment'

/** The clients of the fan-out bench, in a process of their own: join, then note how late each message is. */

const told = z
  .object({
    url: z.url(),
    clients: z.number(),
    firingIds: z.array(z.string()),
    cookie: z.string(),
  })
  .parse(JSON.parse(process.argv[2] ?? ''))

const messageSchema = z.object({ sentAtMs: z.number() })
const delaysMs: number[] = []

async function connectOne(i: number): Promise<void> {
  const socket = io(`${told.url}/live`, {
    forceNew: true,
    transports: ['websocket'],
    extraHeaders: { origin: testOrigin, cookie: told.cookie },
  })
  socket.on('firing:readings', (message: unknown) => {
    // The hub's own messages and those of the warm-up carry no instant of sending.
    const parsed = messageSchema.safeParse(message)
    if (parsed.success) {
      delaysMs.push(performance.timeOrigin + performance.now() - parsed.data.sentAtMs)
    }
  })
  await new Promise<void>((resolve, reject) => {
    socket.once('connect', resolve)
    socket.once('connect_error', reject)
  })
  await socket.emitWithAck('firing:join', { firingId: told.firingIds[i % told.firingIds.length] })
}

for (let i = 0; i < told.clients; i += 25) {
  const some = Array.from({ length: Math.min(25, told.clients - i) }, (_, k) => connectOne(i + k))
  await Promise.all(some)
}
process.once('message', () => process.send?.({ delaysMs }, undefined, undefined, () => process.exit(0)))
process.send?.('joined')
