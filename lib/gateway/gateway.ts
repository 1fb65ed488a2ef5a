import { randomUUID } from 'node:crypto'
import { createSender, systemClock, type GatewayClock, type SenderEvents, type SenderState } from './sender'
import { createSpool, type ReadingDraft, type SpoolStatus } from './spool'
import type { SpoolFiles } from './spool-files'
import type { Transport } from './transport'

export type Gateway = {
  bootId: string
  /** Keeps readings on disk and sends them as soon as the line allows. */
  record: (drafts: readonly ReadingDraft[]) => void
  /** The box's clock was set since the start, by so much in all: what is not sent yet is dated anew. */
  setClockShift: (shiftMs: number) => void
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
  /** As the sender's. */
  slowRetryMs?: number
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
  const disk = createDiskTeller(options)
  const flushing = createDiskTeller(options)
  let cancelFlush = () => {}
  const flush = () => {
    try {
      spool.flush()
      flushing.works()
    } catch (error) {
      flushing.fails(`The disk does not keep readings for sure (${messageOf(error)}).`)
    }
  }
  const flushLater = () => {
    cancelFlush = clock.wait(FLUSH_EVERY_MS, () => {
      flush()
      flushLater()
    })
  }
  flushLater()
  sender.wake()
  return {
    bootId,
    record: (drafts) => {
      const { kept, from, to, dropped } = spool.append(drafts)
      if (kept) disk.works()
      else disk.loses(from, to)
      if (dropped > 0) {
        options.onTrouble?.(
          `The spool is full: the ${dropped} oldest readings were dropped for new ones, and the server is told.`,
        )
      }
      sender.wake()
    },
    setClockShift: spool.setClockShift,
    status: () => ({ ...spool.status(), sender: sender.state() }),
    stop: async () => {
      cancelFlush()
      await sender.stop()
      flush()
    },
  }
}

/** Says once that the disk is in trouble, and once how many readings that cost. */
function createDiskTeller({ onTrouble, onRecovered }: SenderEvents) {
  let isFailing = false
  let lostReadings = 0
  const fails = (sentence: string) => {
    if (!isFailing) onTrouble?.(sentence)
    isFailing = true
  }
  return {
    fails,
    loses: (from: number, to: number) => {
      lostReadings += to - from + 1
      fails(
        `The disk takes no more readings: from number ${from} on they are lost, and told so to the server.`,
      )
    },
    works: () => {
      if (!isFailing) return
      onRecovered?.(`The disk takes readings again; ${lostReadings} were lost.`)
      isFailing = false
      lostReadings = 0
    },
  }
}

function messageOf(error: unknown): string {
  return error instanceof Error ? error.message : String(error)
}
