import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import type { Cluster } from '@/lib/setup/postgres.mjs'
import { testDatabaseEnvironment } from '@/lib/setup/test-environment.mjs'
import { closeOrm } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import type { Child } from '@/tests/faults/child'
import { startChild } from '@/tests/faults/child'
import { freePort } from '@/tests/faults/free-port'
import type { GatewayCommand, GatewayTask } from '@/tests/faults/gateway-commands'
import { taskVariable } from '@/tests/faults/gateway-commands'
import { followGatewayLog } from '@/tests/faults/gateway-log'
import type { Ledger } from '@/tests/faults/ledger'
import { createLedger } from '@/tests/faults/ledger'
import type { Line } from '@/tests/faults/line'
import { openLine } from '@/tests/faults/line'
import type { ProgramRig } from '@/tests/faults/program-rig'
import { startProgramRig } from '@/tests/faults/program-rig'
import type { SpoolDisk } from '@/tests/faults/spool-disk'
import { makeSpoolDisk, unmountLeftovers } from '@/tests/faults/spool-disk'
import type { Store } from '@/tests/faults/store'
import { openStore } from '@/tests/faults/store'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { testOrigin } from '@/tests/support/environment'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'
import type { TestGateway, TestProbe } from '@/tests/support/room'
import { createTestGateway, createTestProbe } from '@/tests/support/room'

/** The server as a child process, always on the same port. */
export type ServerRig = { start: () => void; kill: () => Promise<void>; child: () => Child }

/** A gateway of the suite: its spool and its log outlive its process. */
export type GatewayRig = {
  identity: TestGateway
  probes: TestProbe[]
  disk: SpoolDisk
  /** Neither it nor its disk is touched, so that its firing can be scored whole. */
  isSpared: boolean
  start: () => void
  kill: () => Promise<void>
  child: () => Child
  /** Heard by this process and by those that are started later. */
  command: (command: GatewayCommand) => void
  writeToken: (token: string) => void
}

/** Everything that the suite runs and may break. */
export type Rig = {
  cluster: Cluster
  database: TestDatabase
  people: TestPeople
  store: Store
  server: ServerRig
  /** From the gateways to the server, and from the viewers. */
  lines: { gateways: Line; viewers: Line }
  gateways: GatewayRig[]
  /** The whole gateway program, reading a simulated module. */
  program: ProgramRig
  ledger: Ledger
  readLogs: () => void
  close: () => Promise<void>
}

const probesEach = 4

export async function makeRig(cluster: Cluster, seed: number): Promise<Rig> {
  unmountLeftovers()
  const folder = mkdtempSync(join(tmpdir(), `emberstave-faults-${process.pid}-`))
  Object.assign(process.env, testDatabaseEnvironment(cluster))
  delete process.env['TEST_DATABASE_TEMPLATE']
  const database = await createTestDatabase()
  const people = await createPeople(database)
  const port = await freePort()
  const server = serverRig(database, port, folder)
  const lines = { gateways: await openLine(port), viewers: await openLine(port) }
  const ledger = createLedger()
  const gateways: GatewayRig[] = []
  const readers: { gatewayId: string; read: () => void; close: () => void }[] = []
  for (const [i, clockAheadMs] of [0, 7_000, -90_000].entries()) {
    const place = join(folder, `gateway-${i}`)
    const disk = makeSpoolDisk(place)
    const logPath = join(folder, `gateway-${i}.log`)
    const { gateway, gatewayId } = await makeGateway({
      disk,
      isSpared: i === 0,
      tokenFile: join(folder, `gateway-${i}.token`),
      task: { serverUrl: lines.gateways.url, logPath, clockAheadMs, seed: seed + i },
    })
    gateways.push(gateway)
    const reader = followGatewayLog(logPath)
    readers.push({ gatewayId, read: () => ledger.take(gatewayId, reader.read()), close: reader.close })
  }
  const program = await startProgramRig(join(folder, 'program'), lines.gateways.url)
  return {
    cluster,
    database,
    people,
    store: openStore(database.databaseUrl),
    server,
    lines,
    gateways,
    program,
    ledger,
    readLogs: () => {
      for (const reader of readers) reader.read()
    },
    close: async () => {
      await Promise.all(gateways.map((gateway) => gateway.kill()))
      await program.close()
      await server.kill()
      for (const line of Object.values(lines)) await line.close()
      for (const reader of readers) reader.close()
      for (const { disk } of gateways) disk.remove()
      await closeIngestPool()
      await closeOrm()
      rmSync(folder, { recursive: true, force: true })
    },
  }
}

function serverRig(database: TestDatabase, port: number, folder: string): ServerRig {
  const env = {
    DATABASE_URL: database.databaseUrl,
    SESSION_SECRET: process.env['SESSION_SECRET'] ?? '',
    APP_ORIGIN: testOrigin,
    PORT: String(port),
    EMBERSTAVE_MODE: 'test',
    DATA_DIR: folder,
    LOG_LEVEL: 'error',
  }
  let child: Child | null = null
  const running = () => {
    if (child === null) throw new Error('the server was not started')
    return child
  }
  return {
    start: () => {
      child = startChild('tests/faults/server.ts', [], env)
    },
    kill: async () => {
      await child?.kill()
    },
    child: running,
  }
}

type GatewayOptions = {
  disk: SpoolDisk
  isSpared: boolean
  tokenFile: string
  task: Pick<GatewayTask, 'serverUrl' | 'logPath' | 'clockAheadMs' | 'seed'>
}

async function makeGateway({ disk, isSpared, tokenFile, task }: GatewayOptions) {
  const identity = await createTestGateway()
  const probes: TestProbe[] = []
  for (let channel = 1; channel <= probesEach; channel += 1)
    probes.push(await createTestProbe(identity.gatewayId, channel))
  const writeToken = (token: string) => writeFileSync(tokenFile, `${token}\n`, { mode: 0o600 })
  writeToken(identity.token)
  let child: Child | null = null
  let starts = 0
  let { clockAheadMs } = task
  const gateway: GatewayRig = {
    identity,
    probes,
    disk,
    isSpared,
    writeToken,
    start: () => {
      starts += 1
      const whole: GatewayTask = {
        ...task,
        spoolFolder: disk.folder,
        tokenFile,
        probeIds: probes.map((probe) => probe.id),
        intervalMs: 200,
        clockAheadMs,
        seed: task.seed + 1_000 * starts,
      }
      child = startChild('tests/faults/gateway.ts', [], { [taskVariable]: JSON.stringify(whole) })
    },
    kill: async () => {
      await child?.kill()
    },
    child: () => {
      if (child === null) throw new Error('the gateway was not started')
      return child
    },
    command: (command) => {
      if (command.kind === 'clock') clockAheadMs = command.aheadMs
      child?.send(command)
    },
  }
  return { gateway, gatewayId: identity.gatewayId }
}
