import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import * as z from 'zod'
import { startControl } from './control'
import { readDemoFile } from './demo-file'
import { createFaultBoard } from './fault-board'
import { gatewayFaultSchema, moduleFaultSchema } from './faults'
import { startModbusFedGateway } from './modbus-feed'
import { openOwnFirings } from './own-firings'
import { createRoom, type Room } from './room'
import { createServerView } from './server-view'
import { createSimulatedGateway, type SimulatedGateway } from './simulated-gateway'

/*
 * The live simulator: the demo's gateways with their probes, the fires under them, and a toaster who tends the
 * demo's own firings. Everything it does to the server goes the way a real gateway and a real toaster go.
 */

const environmentSchema = z.object({
  SERVER_URL: z.url('SERVER_URL must be the address of the server, such as http://127.0.0.1:3000'),
  DEMO_FILE: z.string('DEMO_FILE must name the file that the seed wrote'),
  SPOOL_DIR: z.string('SPOOL_DIR must name a folder for readings that were not acknowledged'),
  /** How readings travel: by the gateway's client in here, or by Modbus modules that the gateway program reads. */
  FEED: z.enum(['direct', 'modbus'], 'FEED must be direct or modbus').default('direct'),
  CONTROL_PORT: z.coerce.number().int().min(0).max(65_535).default(0),
})

const TICK_MS = 200
const LOOK_EVERY_MS = 1_500

function say(sentence: string) {
  console.log(`hearth simulator: ${sentence}`)
}

async function main() {
  const environment = environmentSchema.parse(process.env)
  const { demo, seededAtMs } = readDemoFile(environment.DEMO_FILE)
  if (demo.gateways.length === 0) {
    say('the seeded site has no gateways yet, so there is nothing to simulate')
    return waitForEnd()
  }
  const toaster = demo.signIns.find((one) => one.role === 'toaster')
  if (toaster === undefined) throw new Error('The demo file names no toaster to sign in as.')
  const board = createFaultBoard(Date.now)
  const gateways = await Promise.all(
    demo.gateways.map((gateway) => {
      const { SERVER_URL: serverUrl, SPOOL_DIR: spoolDir } = environment
      const options = { demo: gateway, serverUrl, spoolDir, board, say }
      return environment.FEED === 'modbus' ? startModbusFedGateway(options) : createSimulatedGateway(options)
    }),
  )
  const room = createRoom({
    view: createServerView({
      serverUrl: environment.SERVER_URL,
      email: toaster.email,
      password: toaster.password,
    }),
    own: openOwnFirings(join(environment.SPOOL_DIR, 'own-firings.json'), seededAtMs),
    gateways: demo.gateways,
    say,
  })
  if (environment.CONTROL_PORT !== 0) {
    await startControl(environment.CONTROL_PORT, board, ({ hearth, kind }) => {
      const isKnown = environment.FEED === 'modbus' ? !isDirectOnly(kind) : !isModuleFault(kind)
      say(
        isKnown
          ? `on command: ${kind} at hearth ${hearth}`
          : `${kind} does nothing with FEED=${environment.FEED}`,
      )
      if (kind === 'restart') void gatewayOf(gateways, hearth)?.restart()
    })
    say(`takes faults at http://127.0.0.1:${environment.CONTROL_PORT}/faults`)
  }
  say(`${demo.gateways.length} gateways read ${demo.gateways.flatMap((one) => one.hearths).length} hearths`)
  await run(room, gateways, (hearth, readings) => board.spoil(hearth, readings))
}

function isModuleFault(kind: string): boolean {
  return moduleFaultSchema.safeParse(kind).success
}

/** Faults of the line to the server are those of the client in here; the gateway program's line is its own. */
function isDirectOnly(kind: string): boolean {
  return gatewayFaultSchema.safeParse(kind).success && kind !== 'restart'
}

function gatewayOf(gateways: readonly SimulatedGateway[], hearth: number): SimulatedGateway | undefined {
  return gateways.find((gateway) => gateway.demo.hearths.includes(hearth))
}

/** Stays there, as the programs that it is started with do, until told to end. */
function waitForEnd(): Promise<void> {
  return new Promise((resolve) => {
    const idle = setInterval(() => {}, 60_000)
    for (const signal of ['SIGTERM', 'SIGINT'] as const) {
      process.once(signal, () => {
        clearInterval(idle)
        resolve()
      })
    }
  })
}

type Spoil = ReturnType<typeof createFaultBoard>['spoil']

/** Reads five times a second until told to end; then lets what is under way arrive. */
async function run(room: Room, gateways: readonly SimulatedGateway[], spoil: Spoil) {
  const ending = new AbortController()
  for (const signal of ['SIGTERM', 'SIGINT'] as const) process.once(signal, () => ending.abort())
  const ticking = setInterval(() => {
    const readings = room.tick(Date.now())
    for (const gateway of gateways) {
      const own = gateway.demo.hearths.map(
        (hearth) => [hearth, spoil(hearth, readings.get(hearth) ?? [])] as const,
      )
      gateway.record(new Map(own))
    }
  }, TICK_MS)
  await keepLooking(room, ending.signal)
  clearInterval(ticking)
  await Promise.all(gateways.map((gateway) => gateway.stop()))
}

/** Looks at the server over and over; says what is wrong once, however long it stays so. */
async function keepLooking(room: Room, ending: AbortSignal) {
  let trouble: string | null = null
  while (!ending.aborted) {
    try {
      await room.look(Date.now())
      if (trouble !== null) say('the server answers again')
      trouble = null
    } catch (error) {
      const sentence = error instanceof Error ? error.message : String(error)
      if (sentence !== trouble) say(`looking at the server: ${sentence}`)
      trouble = sentence
    }
    await sleep(LOOK_EVERY_MS, undefined, { signal: ending }).catch(() => {})
  }
}

try {
  await main()
  process.exit(0)
} catch (error) {
  const sentence = error instanceof z.ZodError ? z.prettifyError(error) : String(error)
  console.error(`hearth simulator: ${sentence}`)
  process.exit(1)
}
