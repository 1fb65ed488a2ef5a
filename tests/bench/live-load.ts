import { randomUUID } from 'node:crypto'
import { io, type Socket } from 'socket.io-client'
import { createSocketTransport } from '@/lib/gateway/socket-transport'
import type { Transport } from '@/lib/gateway/transport'
import type { DemoFile, DemoGateway } from '@/simulators/hearth/demo-file'

const hz = 5
const startC = { lead: 150, opposite: 147, coals: 640 } as const

export type LiveLoad = {
  /** When each reading of a lead probe was committed, ms, by its instant. */
  committedAtMs: ReadonlyMap<number, number>
  stop: () => Promise<void>
}

/**
 * Gateways that send every probe of the demo at 5 readings a second over their sockets, all probes of a gateway in one
 * message, and note when the server had committed it.
 */
export function startLiveLoad(
  demo: DemoFile,
  serverUrl: string,
  onTrouble: (words: string) => void,
): LiveLoad {
  const committedAtMs = new Map<number, number>()
  const gateways = demo.gateways.map((gateway) => ({
    gateway,
    bootId: randomUUID(),
    nextSeq: 1,
    transport: createSocketTransport({ serverUrl, token: gateway.token }),
  }))
  const timer = setInterval(() => {
    for (const one of gateways) if (one.transport.isReady()) void sendTick(one, committedAtMs, onTrouble)
  }, 1_000 / hz)
  return {
    committedAtMs,
    stop: async () => {
      clearInterval(timer)
      await Promise.all(gateways.map((one) => one.transport.close()))
    },
  }
}

async function sendTick(
  one: { gateway: DemoGateway; bootId: string; nextSeq: number; transport: Transport },
  committedAtMs: Map<number, number>,
  onTrouble: (words: string) => void,
): Promise<void> {
  const atMs = Date.now()
  const at = new Date(atMs).toISOString()
  const readings = one.gateway.probes.map(({ id, role }) => {
    const tempC = startC[role] + 3 * Math.sin(atMs / 9_000) + Math.round(Math.random() * 20) / 100
    return { seq: one.nextSeq++, probeId: id, at, tempC }
  })
  const outcome = await one.transport.send({ bootId: one.bootId, sentAt: at, readings })
  if (outcome.kind === 'answer') committedAtMs.set(atMs, Date.now())
  else
    onTrouble(outcome.kind === 'problem' ? (outcome.problem.detail ?? outcome.problem.title) : outcome.detail)
}

/** Viewers that each follow one firing, the firings in turn. */
export async function startViewers(
  origin: string,
  cookie: string,
  firingIds: readonly string[],
  count: number,
): Promise<() => void> {
  const sockets: Socket[] = []
  for (let i = 0; i < count; i += 1) {
    const socket = io(`${origin}/live`, {
      forceNew: true,
      transports: ['websocket'],
      extraHeaders: { origin, cookie },
    })
    await new Promise<void>((resolve, reject) => {
      socket.once('connect', resolve)
      socket.once('connect_error', reject)
    })
    await socket.emitWithAck('firing:join', { firingId: firingIds[i % firingIds.length] })
    sockets.push(socket)
  }
  return () => sockets.forEach((socket) => socket.close())
}
