import { randomUUID } from 'node:crypto'
import { createSender, systemClock, type GatewayClock, type SenderEvents, type SenderState } from './sender'
import { createSpool, type ReadingDraft, type SpoolStatus } from './spool'
import type { SpoolFiles } from './spool-files'
import type { Transport } from './transport'

export type Gateway = {
  bootId: string
  /** Keeps readings on disk and sends them as soon as the line allows. */
  record: (drafts: readonly ReadingDraft[]) => void
  status: () => SpoolStatus & { sender: SenderState }
  /** What is not acknowledged stays on disk for the next start. */
  stop: () => Promise<void>
}

type GatewayOptions = SenderEvents & {
  files: SpoolFiles
  transports: readonly Transport[]
  bootId?: string
  clock?: GatewayClock
  maxSpoolBytes?: number
  /** Shown on the gateway's page beside the depth of its spool; left out, no status is sent. */
  programVersion?: string
}

/** A loss of power may cost what was read in this time; a killed process costs nothing. */
const FLUSH_EVERY_MS = 1_000

/**
 * The gateway program: a boot id of its own for each start, a spool that outlives it, one sender. What an earlier
 * start left is sent first, under its own boot id.
 */
export function createGateway(options: GatewayOptions): Gateway {
  const { files, clock = systemClock, bootId = randomUUID() } = options
  const spool = createSpool({
    files,
    bootId,
    ...(options.maxSpoolBytes === undefined ? {} : { maxBytes: options.maxSpoolBytes }),
  })
  const startedMs = performance.now()
  const uptimeS = () => (performance.now() - startedMs) / 1_000
  const sender = createSender({
    ...options,
    spool,
    clock,
    ...(options.programVersion === undefined
      ? {}
      : { program: { version: options.programVersion, uptimeS } }),
  })
  let cancelFlush = () => {}
  const flushLater = () => {
    cancelFlush = clock.wait(FLUSH_EVERY_MS, () => {
      spool.flush()
      flushLater()
    })
  }
  flushLater()
  sender.wake()
  return {
    bootId,
    record: (drafts) => {
      const { kept, from, to } = spool.append(drafts)
      if (!kept) options.onTrouble?.(`The disk takes no more readings: ${from} to ${to} are lost.`)
      sender.wake()
    },
    status: () => ({ ...spool.status(), sender: sender.state() }),
    stop: async () => {
      cancelFlush()
      await sender.stop()
      spool.flush()
    },
  }
}
