import { mkdirSync } from 'node:fs'
import { join } from 'node:path'
import { createGateway, type Gateway } from '@/lib/gateway/gateway'
import { createHttpTransport } from '@/lib/gateway/http-transport'
import { programVersion } from '@/lib/gateway/program-version'
import { systemClock, type GatewayClock } from '@/lib/gateway/sender'
import { createSocketTransport } from '@/lib/gateway/socket-transport'
import type { ReadingDraft } from '@/lib/gateway/spool'
import { openSpoolFolder } from '@/lib/gateway/spool-files'
import type { DemoGateway } from './demo-file'
import type { FaultBoard } from './fault-board'
import { CLOCK_SKEW_MS, type GatewayFaultKind } from './faults'
import { createFaultyTransport } from './faulty-transport'
import type { HearthReading } from './hearth'

export type SimulatedGateway = {
  demo: DemoGateway
  /** Takes readings by hearth, each at its own instant (`timeS`, s since 1970), told by the gateway's own clock. */
  record: (readingsByHearth: ReadonlyMap<number, readonly HearthReading[]>) => void
  /** As after a loss of power: a new boot id, what was not acknowledged is sent under the old one. */
  restart: () => Promise<void>
  stop: () => Promise<void>
}

type Options = {
  demo: DemoGateway
  serverUrl: string
  spoolDir: string
  board: FaultBoard
  say: (sentence: string) => void
}

/** The real gateway client, fed by the simulated hearths, with its faults on command. */
export function createSimulatedGateway({ demo, serverUrl, spoolDir, board, say }: Options): SimulatedGateway {
  const isActive = (kind: GatewayFaultKind) => board.isActive(kind, demo.hearths)
  const clock: GatewayClock = {
    nowMs: () => Date.now() + (isActive('clock skew') ? CLOCK_SKEW_MS : 0),
    wait: systemClock.wait,
  }
  const folder = join(spoolDir, demo.id)
  mkdirSync(folder, { recursive: true })
  const probeIds = new Map(demo.probes.map((probe) => [`${probe.hearth}/${probe.role}`, probe.id]))

  const start = () => {
    const files = openSpoolFolder(folder)
    const transports = [
      createSocketTransport({ serverUrl, token: demo.token }),
      createHttpTransport({ serverUrl, token: demo.token }),
    ]
    const gateway = createGateway({
      files,
      transports: transports.map((transport) => createFaultyTransport(transport, isActive)),
      clock,
      programVersion: `${programVersion} (hearth simulator)`,
      onTrouble: (sentence) => say(`${demo.name}: ${sentence}`),
      onRecovered: (sentence) => say(`${demo.name}: ${sentence}`),
      onRefused: (_bootId, refused) =>
        say(
          `${demo.name}: the server refused ${refused.length} readings, the first because: ${refused[0]?.reason}`,
        ),
    })
    return { files, gateway }
  }
  let running: { files: { close: () => void }; gateway: Gateway } | null = start()
  const stop = async () => {
    const stopping = running
    running = null
    await stopping?.gateway.stop()
    stopping?.files.close()
  }

  return {
    demo,
    record: (readingsByHearth) => {
      const skewMs = clock.nowMs() - Date.now()
      const drafts: ReadingDraft[] = []
      for (const [hearth, readings] of readingsByHearth) {
        for (const { probe, emf, flag, timeS } of readings) {
          const at = new Date(Math.round(timeS * 1_000 + skewMs)).toISOString()
          const probeId = probeIds.get(`${hearth}/${probe}`)
          if (probeId !== undefined)
            drafts.push({ probeId, at, emf, ...(flag === undefined ? {} : { flag }) })
        }
      }
      running?.gateway.record(drafts)
    },
    restart: async () => {
      await stop()
      running = start()
    },
    stop,
  }
}
