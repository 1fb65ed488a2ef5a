import { afterEach, describe, expect, it } from 'vitest'
import { gatewayConfigSchema, type ModuleConfig } from '@/lib/gateway/config'
import { createModbusConnection, ModuleRefusal } from '@/lib/gateway/modbus-connection'
import { createModbusModule, type ChannelReading, type ModbusModule } from '@/lib/gateway/modbus-module'
import { systemSteadyClock } from '@/lib/gateway/poll-schedule'
import { wordOrders } from '@/lib/gateway/registers'
import { until } from '@/tests/support/until'
import type { ModuleBehaviour } from '@/simulators/modbus/modbus-server'
import { startSimulatedModule, type SimulatedModule } from '@/simulators/modbus/simulated-module'

const LEAD = '8f14e45f-ceea-467f-a1b2-0c5d6e7f8a01'
const OPPOSITE = '8f14e45f-ceea-467f-a1b2-0c5d6e7f8a02'
const COALS = '8f14e45f-ceea-467f-a1b2-0c5d6e7f8a03'
/** Ample for a busy machine; where silence is waited for it is short. */
const TIMEOUT_MS = 5_000
const SHORT_TIMEOUT_MS = 150

const channels = [
  {
    probeId: LEAD,
    kind: 'microvolts',
    table: 'input',
    address: 10,
    type: 'int32',
    wordOrder: 'mixed',
    scale: 0.1,
    coldJunction: { table: 'input', address: 0, type: 'int16', scale: 0.01 },
    errorCodes: [{ raw: 2_147_483_647, means: 'open' }],
  },
  {
    probeId: OPPOSITE,
    kind: 'temperature',
    table: 'holding',
    address: 4,
    type: 'int16',
    scale: 0.1,
    status: {
      table: 'holding',
      address: 9,
      bits: [
        { bit: 0, means: 'open' },
        { bit: 1, means: 'short' },
      ],
    },
  },
  { probeId: COALS, kind: 'temperature', table: 'input', address: 40, type: 'float32', wordOrder: 'little' },
]

function configOf(port: number, change: object = {}): ModuleConfig {
  return gatewayConfigSchema.shape.modules.element.parse({
    name: 'Box',
    host: '127.0.0.1',
    port,
    timeoutMs: TIMEOUT_MS,
    channels,
    ...change,
  })
}

const started: { close: () => unknown }[] = []
afterEach(async () => {
  for (const one of started.splice(0).reverse()) await one.close()
})

async function startBoth(change: object = {}) {
  const served: string[] = []
  const simulated = await startSimulatedModule({
    config: configOf(1, change),
    onAnswered: ({ table, address, count }) => served.push(`${table} ${address}+${count}`),
  })
  started.push(simulated)
  const said: string[] = []
  const module = createModbusModule({
    config: configOf(simulated.port, change),
    clock: systemSteadyClock,
    random: () => 0,
    onTrouble: (sentence) => said.push(sentence),
    onRecovered: (sentence) => said.push(sentence),
  })
  started.push(module)
  return { simulated, module, said, served }
}

function showAll(simulated: SimulatedModule) {
  simulated.show(
    new Map([
      [LEAD, { emf: { microvolts: 8_123.4, coldJunctionC: 24.62 } }],
      [OPPOSITE, { tempC: 187.3 }],
      [COALS, { tempC: 612.5 }],
    ]),
  )
}

function values(readings: readonly ChannelReading[]) {
  return readings.map(({ steadyMs: _steadyMs, ...rest }) => rest)
}

const allWell = [
  { probeId: LEAD, emf: { microvolts: expect.closeTo(8_123.4, 9), coldJunctionC: expect.closeTo(24.62, 9) } },
  { probeId: OPPOSITE, tempC: expect.closeTo(187.3, 9) },
  { probeId: COALS, tempC: 612.5 },
]
const allFaults = [LEAD, OPPOSITE, COALS].map((probeId) => ({ probeId, flag: 'fault' }))

/** Polls as the program does until what is asked for comes. */
async function pollUntil(module: ModbusModule, holds: (readings: readonly ChannelReading[]) => boolean) {
  const seen: ChannelReading[] = []
  await until(async () => {
    const readings = await module.poll()
    seen.push(...readings)
    return holds(readings)
  })
  return seen
}

describe('a module over Modbus TCP', () => {
  it('gives each channel as its register map says, by one request for each run of registers', async () => {
    const { simulated, module, said, served } = await startBoth()
    showAll(simulated)
    const beforeMs = performance.now()
    const readings = await module.poll()
    expect(values(readings)).toEqual(allWell)
    for (const { steadyMs } of readings) {
      expect(steadyMs).toBeGreaterThanOrEqual(beforeMs)
      expect(steadyMs).toBeLessThanOrEqual(performance.now())
    }
    expect(served).toEqual(['holding 4+1', 'holding 9+1', 'input 0+1', 'input 10+2', 'input 40+2'])
    expect(simulated.connectionCount()).toBe(1)
    expect(said).toEqual([])
  })

  it('keeps its one connection from poll to poll, and reads unused registers along where that is allowed', async () => {
    const { simulated, module, served } = await startBoth({ mostGapRegisters: 5 })
    // Registers between are there in this module.
    for (const address of [5, 6, 7, 8]) simulated.setRegister('holding', address, 0)
    showAll(simulated)
    for (let i = 0; i < 3; i += 1) expect(values(await module.poll())).toEqual(allWell)
    expect(served.slice(0, 4)).toEqual(['holding 4+6', 'input 0+1', 'input 10+2', 'input 40+2'])
    expect(simulated.connectionCount()).toBe(1)
  })

  it.each(wordOrders)('reads what a module with the word order %s writes', async (wordOrder) => {
    const change = {
      channels: [
        { ...channels[0], wordOrder },
        { ...channels[2], wordOrder },
      ],
    }
    const { simulated, module } = await startBoth(change)
    simulated.show(
      new Map([
        [LEAD, { emf: { microvolts: -312.7, coldJunctionC: -4.05 } }],
        [COALS, { tempC: 843.25 }],
      ]),
    )
    expect(values(await module.poll())).toEqual([
      {
        probeId: LEAD,
        emf: { microvolts: expect.closeTo(-312.7, 9), coldJunctionC: expect.closeTo(-4.05, 9) },
      },
      { probeId: COALS, tempC: 843.25 },
    ])
  })

  it('one channel’s open circuit or short is its own, by error code and by status bit', async () => {
    const { simulated, module } = await startBoth()
    showAll(simulated)
    simulated.show(
      new Map([
        [LEAD, { flag: 'open' }],
        [OPPOSITE, { flag: 'short' }],
      ]),
    )
    expect(values(await module.poll())).toEqual([
      { probeId: LEAD, flag: 'open' },
      { probeId: OPPOSITE, flag: 'short' },
      { probeId: COALS, tempC: 612.5 },
    ])
    showAll(simulated)
    expect(values(await module.poll())).toEqual(allWell)
  })

  it('registers that the module has not make faults of their channels only, and the line stays', async () => {
    const { simulated, module, said } = await startBoth({
      channels: [...channels.slice(0, 2), { ...channels[2], address: 40 }],
    })
    showAll(simulated)
    const strange = createModbusModule({
      config: configOf(simulated.port, { channels: [channels[0], { ...channels[2], address: 900 }] }),
      clock: systemSteadyClock,
      onTrouble: (sentence) => said.push(sentence),
    })
    started.push(strange)
    for (let i = 0; i < 3; i += 1) {
      expect(values(await strange.poll())).toEqual([allWell[0], { probeId: COALS, flag: 'fault' }])
    }
    expect(said).toHaveLength(1)
    expect(said[0]).toMatch(
      /^Box \(127\.0\.0\.1:\d+, unit 1\) refuses registers \(input registers 900 to 901: .*address/,
    )
    expect(simulated.connectionCount()).toBe(1)
    expect(module.state()).toBe('not tried yet')
  })

  const silences: [what: string, behaviour: ModuleBehaviour][] = [
    ['hangs', { kind: 'hang' }],
    ['answers too late', { kind: 'slow', delayMs: 3 * SHORT_TIMEOUT_MS }],
    ['cuts the line', { kind: 'drop' }],
    ['has no power', { kind: 'off' }],
    ['answers garbage', { kind: 'garbage' }],
  ]

  it.each(silences)(
    'one that %s gives faults, never silence and never the last value, and comes back by itself',
    async (_what, behaviour) => {
      const { simulated, module, said } = await startBoth({ timeoutMs: SHORT_TIMEOUT_MS })
      showAll(simulated)
      await pollUntil(module, (readings) => readings.some(({ flag }) => flag === undefined))
      said.splice(0)
      await simulated.behave(behaviour)
      const first = await pollUntil(module, (readings) => readings.length > 0)
      expect(values(first)).toEqual(allFaults)
      // Some 1.2 s of polls: at most one fault a second for each probe, and nothing but faults.
      const more: ChannelReading[] = []
      for (const untilMs = performance.now() + 1_200; performance.now() < untilMs;) {
        more.push(...(await module.poll()))
        await new Promise((resolve) => setTimeout(resolve, 50))
      }
      expect(new Set(more.map(({ flag }) => flag))).toEqual(new Set(['fault']))
      expect(more.length).toBeGreaterThanOrEqual(3)
      expect(more.length).toBeLessThanOrEqual(6)
      expect(module.state()).toBe('does not answer')
      expect(said.filter((sentence) => sentence.includes('does not answer'))).toHaveLength(1)

      simulated.show(new Map([[COALS, { tempC: 700 }]]))
      await simulated.behave({ kind: 'normal' })
      const back = await pollUntil(module, (readings) => readings.some(({ flag }) => flag === undefined))
      expect(values(back.slice(-3))).toEqual([allWell[0], allWell[1], { probeId: COALS, tempC: 700 }])
      expect(said.at(-1)).toMatch(/answers again, after \d+ s\.$/)
    },
  )

  it('every kind of garbage is a fault and nothing of it becomes a number', async () => {
    const { simulated } = await startBoth()
    await simulated.behave({ kind: 'garbage' })
    for (let i = 0; i < 14; i += 1) {
      const connection = createModbusConnection({
        host: '127.0.0.1',
        port: simulated.port,
        unitId: 1,
        timeoutMs: 60,
      })
      await connection.open()
      await expect(connection.read({ table: 'input', address: 10, count: 2 })).rejects.toThrow(Error)
      connection.close()
    }
  })

  it('a module that answers "busy" or "failure" gives faults and keeps its line', async () => {
    const { simulated, module, said } = await startBoth()
    showAll(simulated)
    for (const code of [6, 4, 11]) {
      await simulated.behave({ kind: 'exception', code })
      expect(values(await module.poll())).toEqual(allFaults)
    }
    await simulated.behave({ kind: 'normal' })
    expect(values(await module.poll())).toEqual(allWell)
    expect(simulated.connectionCount()).toBe(1)
    expect(said).toHaveLength(2)
    const connection = createModbusConnection({
      host: '127.0.0.1',
      port: simulated.port,
      unitId: 1,
      timeoutMs: TIMEOUT_MS,
    })
    started.push(connection)
    await connection.open()
    await simulated.behave({ kind: 'exception', code: 6 })
    const refusal = await connection
      .read({ table: 'input', address: 0, count: 1 })
      .catch((error: unknown) => error)
    expect(refusal instanceof ModuleRefusal && refusal.exceptionCode).toBe(6)
  })

  it('waits longer between tries while nobody is there', async () => {
    let steadyMs = 0
    const tries: number[] = []
    const module = createModbusModule({
      config: configOf(1),
      clock: { steadyMs: () => steadyMs, wait: () => () => {} },
      random: () => 1,
      connect: () => ({
        isOpen: () => false,
        open: () => {
          tries.push(steadyMs)
          return Promise.reject(new Error('nobody there'))
        },
        read: () => Promise.reject(new Error('not open')),
        close: () => {},
      }),
    })
    let faults = 0
    for (; steadyMs < 60_000; steadyMs += 50) faults += (await module.poll()).length
    const waits = tries.map((at, i) => at - (tries[i - 1] ?? 0)).slice(1)
    expect(waits.slice(0, 6)).toEqual([250, 500, 1_000, 2_000, 4_000, 8_000])
    expect(new Set(waits.slice(6))).toEqual(new Set([10_000]))
    expect(faults).toBe(3 * 60)
  })
})
