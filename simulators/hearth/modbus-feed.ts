import { spawn, type ChildProcess } from 'node:child_process'
import { mkdirSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { createInterface } from 'node:readline'
import { fileURLToPath } from 'node:url'
import type * as z from 'zod'
import { gatewayConfigSchema, type ModuleConfig } from '@/lib/gateway/config'
import type { ChannelValue } from '@/lib/gateway/read-channel'
import { writeTokenFile } from '@/lib/gateway/token-file'
import type { ModuleBehaviour } from '@/simulators/modbus/modbus-server'
import { startSimulatedModule, type SimulatedModule } from '@/simulators/modbus/simulated-module'
import type { DemoGateway } from './demo-file'
import type { FaultBoard } from './fault-board'
import type { ModuleFaultKind } from './faults'
import type { HearthReading } from './hearth'
import type { SimulatedGateway } from './simulated-gateway'

/*
 * The long way round, as in a real toasting room: each simulated hearth has a Modbus TCP module whose registers show
 * its thermocouples, and the gateway program itself, as a process of its own, reads them and sends.
 */

type Options = {
  demo: DemoGateway
  serverUrl: string
  spoolDir: string
  board: Pick<FaultBoard, 'isActive'>
  say: (sentence: string) => void
}

type FedHearth = {
  hearth: number
  module: SimulatedModule
  probeIds: ReadonlyMap<string, string>
  behaviour: ModuleBehaviour['kind']
}

const root = fileURLToPath(new URL('../../', import.meta.url))
const RESTART_AFTER_MS = 2_000
const KILL_AFTER_MS = 5_000
const OPEN_RAW = 2_147_483_647
const SHORT_RAW = -2_147_483_648
const FAULT_RAW = 2_147_483_646

const behaviours: readonly [ModuleFaultKind, ModuleBehaviour][] = [
  ['module off', { kind: 'off' }],
  ['module hangs', { kind: 'hang' }],
  ['module cuts', { kind: 'drop' }],
  ['module garbage', { kind: 'garbage' }],
]

/**
 * The register map of a simulated hearth's module: the terminals' temperature in 0.01 °C at input register 0, then
 * each probe's voltage in 0.1 µV as 32-bit numbers, low word first; one request reads them all.
 */
export function hearthModuleConfig(
  hearth: number,
  probes: DemoGateway['probes'],
  port: number,
): z.input<typeof gatewayConfigSchema>['modules'][number] {
  return {
    name: `Hearth ${hearth}`,
    host: '127.0.0.1',
    port,
    channels: probes.map((probe, i) => ({
      probeId: probe.id,
      label: probe.role,
      kind: 'microvolts',
      table: 'input',
      address: 1 + 2 * i,
      type: 'int32',
      wordOrder: 'mixed',
      scale: 0.1,
      coldJunction: { table: 'input', address: 0, type: 'int16', scale: 0.01 },
      errorCodes: [
        { raw: OPEN_RAW, means: 'open' },
        { raw: SHORT_RAW, means: 'short' },
        { raw: FAULT_RAW, means: 'fault' },
      ],
    })),
  }
}

/** Starts the modules of a gateway's hearths and the gateway program that reads them. */
export async function startModbusFedGateway(options: Options): Promise<SimulatedGateway> {
  const { demo, serverUrl, board } = options
  const folder = join(options.spoolDir, `${demo.id}-modbus`)
  mkdirSync(folder, { recursive: true })
  const hearths = await Promise.all(demo.hearths.map((hearth) => startHearth(hearth, demo)))
  const configPath = join(folder, 'gateway.json')
  writeFileSync(configPath, `${JSON.stringify(configFor(serverUrl, demo, hearths), null, 2)}\n`)
  writeTokenFile(join(folder, 'token'), demo.token)
  const program = keepProgram(configPath, (line) => options.say(`${demo.name}: ${line}`))
  return {
    demo,
    record: (readingsByHearth) => {
      for (const fed of hearths) {
        followFaults(fed, board, options.say)
        fed.module.show(valuesOf(fed, readingsByHearth.get(fed.hearth) ?? []))
      }
    },
    restart: program.restart,
    stop: async () => {
      await program.stop()
      await Promise.all(hearths.map(({ module }) => module.close()))
    },
  }
}

async function startHearth(hearth: number, demo: DemoGateway): Promise<FedHearth> {
  const probes = demo.probes.filter((probe) => probe.hearth === hearth)
  const [config] = parsedModules([hearthModuleConfig(hearth, probes, 1)])
  if (config === undefined) throw new Error(`hearth ${hearth} has no module`)
  return {
    hearth,
    module: await startSimulatedModule({ config }),
    probeIds: new Map(probes.map((probe) => [probe.role, probe.id])),
    behaviour: 'normal',
  }
}

function parsedModules(modules: z.input<typeof gatewayConfigSchema>['modules']): ModuleConfig[] {
  return gatewayConfigSchema.shape.modules.parse(modules)
}

function configFor(
  server: string,
  demo: DemoGateway,
  hearths: readonly FedHearth[],
): z.input<typeof gatewayConfigSchema> {
  return {
    server,
    tokenFile: 'token',
    spool: { folder: 'spool' },
    pollIntervalMs: 200,
    modules: hearths.map(({ hearth, module }) =>
      hearthModuleConfig(
        hearth,
        demo.probes.filter((probe) => probe.hearth === hearth),
        module.port,
      ),
    ),
  }
}

/** What the module shows now: of each probe the newest of its readings. */
function valuesOf(fed: FedHearth, readings: readonly HearthReading[]): Map<string, ChannelValue> {
  const values = new Map<string, ChannelValue>()
  for (const { probe, emf, flag } of readings) {
    const probeId = fed.probeIds.get(probe)
    if (probeId !== undefined) values.set(probeId, flag === undefined ? { emf } : { flag })
  }
  return values
}

function followFaults(fed: FedHearth, board: Options['board'], say: Options['say']) {
  const fault = behaviours.find(([kind]) => board.isActive(kind, [fed.hearth]))
  const behaviour: ModuleBehaviour = fault?.[1] ?? { kind: 'normal' }
  if (behaviour.kind === fed.behaviour) return
  fed.behaviour = behaviour.kind
  fed.module.behave(behaviour).catch((error: unknown) => say(`hearth ${fed.hearth}: ${String(error)}`))
}

type KeptProgram = { restart: () => Promise<void>; stop: () => Promise<void> }

/** Runs the gateway program and starts it again whenever it ends, as a service manager would. */
function keepProgram(configPath: string, say: (line: string) => void): KeptProgram {
  let isStopping = false
  let restartTimer: NodeJS.Timeout | undefined
  let child = start()

  function start(): ChildProcess {
    const started = spawn(process.execPath, ['--import', 'tsx', 'lib/gateway/main.ts', configPath], {
      cwd: root,
      env: { PATH: process.env['PATH'], NODE_ENV: process.env.NODE_ENV },
      stdio: ['ignore', 'pipe', 'pipe'],
    })
    for (const stream of [started.stdout, started.stderr]) {
      createInterface({ input: stream }).on('line', say)
    }
    started.on('exit', (code, signal) => {
      if (isStopping || started !== child) return
      say(`the gateway program ended (${signal ?? `exit status ${code}`}) and is started again`)
      restartTimer = setTimeout(() => {
        child = start()
      }, RESTART_AFTER_MS)
    })
    return started
  }
  const end = async (signal: 'SIGTERM' | 'SIGKILL') => {
    clearTimeout(restartTimer)
    if (child.exitCode !== null || child.signalCode !== null) return
    const gone = new Promise<void>((resolve) => child.once('exit', () => resolve()))
    child.kill(signal)
    const late = setTimeout(() => child.kill('SIGKILL'), KILL_AFTER_MS)
    await gone
    clearTimeout(late)
  }
  return {
    // As a loss of power: nothing is flushed, and the next start finds what the disk has.
    restart: async () => {
      const before = child
      await end('SIGKILL')
      if (child === before && !isStopping) {
        clearTimeout(restartTimer)
        child = start()
      }
    },
    stop: async () => {
      isStopping = true
      await end('SIGTERM')
    },
  }
}
