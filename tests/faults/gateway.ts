import { readFileSync } from 'node:fs'
import { createBootClock } from '@/lib/gateway/boot-clock'
import { createGateway } from '@/lib/gateway/gateway'
import { createHttpTransport } from '@/lib/gateway/http-transport'
import { startPolling, systemSteadyClock } from '@/lib/gateway/poll-schedule'
import { programVersion } from '@/lib/gateway/program-version'
import type { Reading } from '@/lib/gateway/protocol'
import { systemClock } from '@/lib/gateway/sender'
import { createSocketTransport } from '@/lib/gateway/socket-transport'
import { openSpoolFolder, type SpoolFiles } from '@/lib/gateway/spool-files'
import { lockSpoolFolder } from '@/lib/gateway/spool-lock'
import { decodeRecords } from '@/lib/gateway/spool-record'
import { seededRandom } from '@/lib/science/seeded-random'
import { createFaultyTransport } from '@/simulators/hearth/faulty-transport'
import { createLateTransport, recordedTransport } from '@/tests/faults/faulty-ways'
import type { GatewayCommand } from '@/tests/faults/gateway-commands'
import { gatewayCommandSchema, gatewayTaskSchema, taskVariable } from '@/tests/faults/gateway-commands'
import { openGatewayLog } from '@/tests/faults/gateway-log'
import { emfOf, woodTempC } from '@/tests/faults/wood'

/*
 * A gateway that the faults suite may kill: the gateway program's own spool, sender, transports, clock and schedule,
 * fed by a wood that is known, with a log of what was acknowledged to it. Only the Modbus side is left out.
 */

const slowRetryMs = 1_500

const task = gatewayTaskSchema.parse(JSON.parse(process.env[taskVariable] ?? '{}'))
const log = openGatewayLog(task.logPath)
const random = seededRandom(task.seed)
const faults = { order: 'as they are', isDiskFull: false, diskDelayMs: 0, aheadMs: task.clockAheadMs }
/** The truth about readings that were made by this process, by number. */
const trueMsBySeq = new Map<number, number>()
/** What the spool holds, by boot and number, as it was written down. */
const atMsByNumber = new Map<string, number>()

await lockSpoolFolder(task.spoolFolder)
const bootClock = createBootClock({ wallMs: () => Date.now() + faults.aheadMs })
const files = openSpoolFolder(task.spoolFolder)
for (const name of files.list()) noteReadings(bootOf(name), readingsIn(files.read(name)))
let newestTrueMs = Date.now()
const isOrder = (order: string) => faults.order === order
const late = [
  createLateTransport(createSocketTransport({ serverUrl: task.serverUrl, token: readToken })),
  createLateTransport(createHttpTransport({ serverUrl: task.serverUrl, token: readToken })),
]
const gateway = createGateway({
  files: watchedFiles(files),
  transports: late.map((way) =>
    recordedTransport(
      createFaultyTransport(way, (kind) => isOrder(kind.replace(' batches', ''))),
      log,
      (bootId, seq) => atMsByNumber.get(`${bootId} ${seq}`),
    ),
  ),
  clock: { nowMs: bootClock.nowMs, wait: systemClock.wait },
  programVersion: `${programVersion} (faults suite)`,
  slowRetryMs,
})

process.on('message', (message) => {
  obey(gatewayCommandSchema.parse(message))
})
process.on('disconnect', () => process.exit(0))

startPolling(task.intervalMs, systemSteadyClock, () => {
  if (bootClock.look() !== null) gateway.setClockShift(bootClock.shiftMs())
  newestTrueMs = Date.now()
  const at = new Date(bootClock.countedMs(performance.now())).toISOString()
  gateway.record(
    task.probeIds.map((probeId, channel) => ({
      probeId,
      at,
      emf: emfOf(woodTempC(newestTrueMs, channel, random()), 24 + random() / 10),
    })),
  )
})

function readToken(): string {
  return readFileSync(task.tokenFile, 'utf8').trim()
}

function obey(command: GatewayCommand): void {
  if (command.kind === 'clock') faults.aheadMs = command.aheadMs
  else if (command.kind === 'disk')
    Object.assign(faults, { isDiskFull: command.isFull, diskDelayMs: command.delayMs })
  else {
    const isOver = faults.order === 'late' && command.order !== 'late'
    faults.order = command.order
    for (const way of late) {
      if (command.order === 'late') way.withhold()
      else if (isOver) void way.letArrive()
    }
  }
}

/** The spool's disk, with what is written to it noted first, and its faults. */
function watchedFiles(inner: SpoolFiles): SpoolFiles {
  return {
    ...inner,
    append: (name, bytes) => {
      const readings = readingsIn(bytes)
      const bootId = bootOf(name)
      for (const { seq } of readings) if (!trueMsBySeq.has(seq)) trueMsBySeq.set(seq, newestTrueMs)
      noteReadings(bootId, readings)
      log.made(bootId, readings, (seq) => trueMsBySeq.get(seq) ?? newestTrueMs)
      if (faults.isDiskFull) throw Object.assign(new Error('no space left (injected)'), { code: 'ENOSPC' })
      // A disk that takes its time holds up everything, as a card that is worn out does.
      if (faults.diskDelayMs > 0) {
        Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, faults.diskDelayMs)
      }
      inner.append(name, bytes)
      log.kept(bootId, readings)
    },
  }
}

function noteReadings(bootId: string, readings: readonly Reading[]): void {
  for (const { seq, at } of readings) atMsByNumber.set(`${bootId} ${seq}`, Date.parse(at))
}

function readingsIn(bytes: Buffer): Reading[] {
  return decodeRecords(bytes).records.flatMap((record) => (record.kind === 'reading' ? [record.reading] : []))
}

/** Segment files are named after the boot that wrote them. */
function bootOf(name: string): string {
  return name.slice(9, 45)
}
