import type { Server as HttpServer } from 'node:http'
import { Server } from 'socket.io'
import { systemActor } from '@/lib/auth/actor'
import { closeOrm } from '@/lib/db/orm'
import { env } from '@/lib/env'
import { scoreFiring } from '@/lib/firings/score-firing'
import { attachGateways } from '@/lib/ingest/attach-gateways'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { startRetention } from '@/lib/ingest/retention'
import { startSealingLoop } from '@/lib/ingest/sealing-loop'
import { attachLive, liveOutput } from '@/lib/live/attach-live'
import { createHub } from '@/lib/live/hub'
import { settleBackground } from '@/lib/mail/in-background'

/** Largest socket message: 5,000 readings are some 0.8 MB. */
const largestMessageBytes = 2 * 1024 * 1024

export type ServerWork = {
  /** Takes no more readings, finishes those under way, ends every socket and the connections to the database. */
  stop: () => Promise<void>
}

/** Everything that the server does besides pages and routes: sockets, live hub, sealing, retention. */
export function startServerWork(httpServer: HttpServer): ServerWork {
  const io = new Server(httpServer, {
    // Next answers the upgrades that are not ours.
    destroyUpgrade: false,
    maxHttpBufferSize: largestMessageBytes,
    cors: { origin: new URL(env().APP_ORIGIN).origin, credentials: true },
    serveClient: false,
    // A viewer whose network is gone is let go in the time in which it would have asked again.
    pingInterval: 10_000,
    pingTimeout: 8_000,
  })
  const hub = createHub(liveOutput(io))
  const stopLive = attachLive(io, hub)
  const gateways = attachGateways(io)
  void hub.start()
  const sealing = startSealingLoop({
    scoreSealed: async (firingId) => {
      await scoreFiring(systemActor('scoring'), { id: firingId })
    },
  })
  const stopRetention = startRetention()
  return {
    stop: async () => {
      stopRetention()
      await gateways.stop()
      await sealing.stop()
      stopLive()
      hub.stop()
      // Without a word of farewell, so that clients take it for a loss and come back by themselves.
      await io.close()
      await settleBackground()
      await Promise.all([closeIngestPool(), closeOrm()])
    },
  }
}
