import { createBootClock, type BootClock } from './boot-clock'
import type { GatewayConfig } from './config'
import { createGateway, type Gateway } from './gateway'
import { createHttpTransport } from './http-transport'
import { createModbusModule, type ChannelReading, type ModbusModule } from './modbus-module'
import { startPolling, systemSteadyClock } from './poll-schedule'
import type { ProgramLog } from './program-log'
import { programVersion } from './program-version'
import { systemClock } from './sender'
import { createSocketTransport } from './socket-transport'
import type { ReadingDraft } from './spool'
import { openSpoolFolder } from './spool-files'
import { lockSpoolFolder } from './spool-lock'
import { isTokenFileOpenToOthers, readToken } from './token-file'

export type RunningGateway = {
  /** Ends polling, gives the message under way its time, and leaves the rest safely on disk. */
  stop: () => Promise<void>
}

const STATUS_LINE_EVERY_MS = 60_000

/**
 * The gateway program: polls the modules, spools, sends, and tells of it in the log. Runs until stopped.
 * `bootClock` is replaced in tests.
 * @throws GatewayError when it cannot begin: no token, no spool folder, or another program on it
 */
export async function runGateway(
  config: GatewayConfig,
  log: ProgramLog,
  bootClock: BootClock = createBootClock(),
): Promise<RunningGateway> {
  const token = createTokenReader(config, log)
  const unlock = await lockSpoolFolder(config.spool.folder)
  const files = openSpoolFolder(config.spool.folder)
  const gateway = createGateway({
    files,
    transports: [
      createSocketTransport({ serverUrl: config.server, token }),
      createHttpTransport({ serverUrl: config.server, token }),
    ],
    clock: { nowMs: bootClock.nowMs, wait: systemClock.wait },
    maxSpoolBytes: config.spool.mostMegabytes * 1024 * 1024,
    programVersion,
    onTrouble: log.warn,
    onRecovered: log.info,
    onRefused: (_bootId, refused) =>
      log.warn(`The server refused ${refused.length} readings, the first because: ${refused[0]?.reason}`),
  })
  const modules = config.modules.map((module) =>
    createModbusModule({
      config: module,
      clock: systemSteadyClock,
      onTrouble: log.warn,
      onRecovered: log.info,
    }),
  )
  sayStart(config, gateway, log)
  const counts = { readings: 0, faults: 0, missedPolls: 0 }
  const stopPolling = startPolling(config.pollIntervalMs, systemSteadyClock, (missed) => {
    counts.missedPolls += missed
    followClock(bootClock, gateway, log)
    for (const module of modules) {
      void module.poll().then((readings) => {
        counts.readings += readings.length
        counts.faults += readings.filter(({ flag }) => flag !== undefined).length
        gateway.record(readings.map((reading) => toDraft(reading, bootClock)))
      })
    }
  })
  let isFirst = true
  const stopStatusLines = startPolling(STATUS_LINE_EVERY_MS, systemSteadyClock, () => {
    // The first turn comes at once, when nothing was read yet.
    if (!isFirst) {
      log.info(printStatusLine(gateway, modules, counts))
      Object.assign(counts, { readings: 0, faults: 0, missedPolls: 0 })
    }
    isFirst = false
  })
  return {
    stop: async () => {
      stopPolling()
      stopStatusLines()
      for (const module of modules) module.close()
      await gateway.stop()
      files.close()
      unlock()
      const { readings } = gateway.status()
      log.info(`Ended. ${readings === 0 ? 'Everything was sent' : `${readings} readings stay in the spool`}.`)
    },
  }
}

/** Reads the token now, so that a missing one is said at once, and again at each try, so that a new one is taken. */
function createTokenReader(config: GatewayConfig, log: ProgramLog): () => string {
  let token = readToken(config)
  if (config.tokenFile !== undefined && isTokenFileOpenToOthers(config.tokenFile)) {
    log.warn(`Others on this box may read ${config.tokenFile}; run: chmod 600 ${config.tokenFile}`)
  }
  return () => {
    try {
      token = readToken(config)
    } catch {
      // The file is being put in place or is gone: the token known so far is as good as any.
    }
    return token
  }
}

function sayStart(config: GatewayConfig, gateway: Gateway, log: ProgramLog) {
  const channels = config.modules.reduce((sum, module) => sum + module.channels.length, 0)
  log.info(
    `Emberstave gateway ${programVersion}: ${channels} channels on ${config.modules.length} modules, ` +
      `every ${config.pollIntervalMs} ms, to ${new URL(config.server).origin}; boot ${gateway.bootId}`,
  )
  const { readings } = gateway.status()
  if (readings > 0) log.info(`${readings} readings of earlier runs wait in the spool and are sent first.`)
  const { protocol, hostname } = new URL(config.server)
  if (protocol === 'http:' && !/^(localhost|127\.|\[::1\])/.test(hostname)) {
    log.warn('The server is reached without TLS (http): whoever listens on this network can read the token.')
  }
}

/** A clock that was set is said in the log, and what is not sent yet is dated anew. */
function followClock(bootClock: BootClock, gateway: Gateway, log: ProgramLog) {
  const stepMs = bootClock.look()
  if (stepMs === null) return
  gateway.setClockShift(bootClock.shiftMs())
  const way = stepMs > 0 ? 'forward' : 'back'
  log.warn(
    `This box's clock was set ${way} by ${(Math.abs(stepMs) / 1_000).toFixed(1)} s. Readings that are not sent yet ` +
      'are dated by the new time; the order of readings stays as it is.',
  )
}

function toDraft({ steadyMs, ...reading }: ChannelReading, bootClock: BootClock): ReadingDraft {
  return { ...reading, at: new Date(bootClock.countedMs(steadyMs)).toISOString() }
}

type Counts = { readings: number; faults: number; missedPolls: number }

function printStatusLine(gateway: Gateway, modules: readonly ModbusModule[], counts: Counts): string {
  const { bytes, readings, lost, sender } = gateway.status()
  const silent = modules.filter((module) => module.state() !== 'answers').map((module) => module.name)
  return [
    `${counts.readings} readings in the last minute`,
    counts.faults > 0 ? `${counts.faults} of them without a value` : null,
    counts.missedPolls > 0 ? `${counts.missedPolls} polls came too late and were left out` : null,
    `spool ${readings} readings, ${Math.ceil(bytes / 1024)} KiB`,
    lost.length > 0 ? `${lost.reduce((sum, { from, to }) => sum + to - from + 1, 0)} lost` : null,
    `sender ${sender}`,
    silent.length > 0 ? `no answer from ${silent.join(', ')}` : 'all modules answer',
  ]
    .filter((part) => part !== null)
    .join('; ')
}
