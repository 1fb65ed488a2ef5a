import { mkdirSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { gatewayConfigSchema } from '@/lib/gateway/config'
import { startSimulatedModule } from '@/simulators/modbus/simulated-module'
import type { Child } from '@/tests/faults/child'
import { startChild } from '@/tests/faults/child'
import type { Store } from '@/tests/faults/store'
import type { TestGateway, TestProbe } from '@/tests/support/room'
import { createTestGateway, createTestProbe } from '@/tests/support/room'

/** The whole gateway program, as `npm run gateway` starts it, on a simulated Modbus module. */
export type ProgramRig = {
  identity: TestGateway
  start: () => void
  kill: () => Promise<void>
  child: () => Child
  kills: () => number
  /** Compares what is stored with what the module answered. */
  compare: (store: Store) => Promise<ProgramFindings>
  close: () => Promise<void>
}

export type ProgramFindings = {
  stored: number
  /** Values that are stored twice, or that the module never said. */
  wrong: string[]
  /** Numbers up to the acknowledged one that are neither stored nor declared lost. */
  lost: string[]
  /** Answers of the module that never became readings: those on the way when the program was killed. */
  unread: number
}

const channelCount = 3

/**
 * The module says another value at each question: a count in hundredths of a degree. So each reading that is stored
 * names the answer that it came from.
 */
export async function startProgramRig(folder: string, serverUrl: string): Promise<ProgramRig> {
  mkdirSync(folder, { recursive: true })
  const identity = await createTestGateway()
  const probes: TestProbe[] = []
  for (let channel = 1; channel <= channelCount; channel += 1)
    probes.push(await createTestProbe(identity.gatewayId, channel))
  const channels = probes.map((probe, i) => ({
    probeId: probe.id,
    kind: 'temperature',
    table: 'input',
    address: 2 * i,
    type: 'float32',
  }))
  const config = gatewayConfigSchema.shape.modules.element.parse({
    name: 'Box',
    host: '127.0.0.1',
    port: 1,
    channels,
  })
  let answered = 0
  const simulated = await startSimulatedModule({ config, onAnswered: () => show((answered += 1)) })
  const show = (count: number) =>
    simulated.show(new Map(probes.map((probe, i) => [probe.id, { tempC: valueOf(count, i) / 100 }])))
  show(0)
  const configPath = join(folder, 'gateway.json')
  writeFileSync(join(folder, 'token'), `${identity.token}\n`, { mode: 0o600 })
  writeFileSync(
    configPath,
    JSON.stringify({
      server: serverUrl,
      tokenFile: 'token',
      spool: { folder: 'spool' },
      modules: [{ name: 'Box', host: '127.0.0.1', port: simulated.port, timeoutMs: 5_000, channels }],
    }),
  )
  let child: Child | null = null
  let kills = 0
  const kill = async () => {
    kills += 1
    await child?.kill()
  }
  return {
    identity,
    start: () => {
      child = startChild('tests/faults/program.ts', [configPath], {})
    },
    kill,
    child: () => {
      if (child === null) throw new Error('the gateway program was not started')
      return child
    },
    kills: () => kills,
    compare: (store) => compare(store, identity.gatewayId, answered),
    close: async () => {
      await kill()
      await simulated.close()
    },
  }
}

/** 0.01 °C: each answer and channel has its own. */
function valueOf(count: number, channel: number): number {
  return count * channelCount + channel
}

async function compare(store: Store, gatewayId: string, answered: number): Promise<ProgramFindings> {
  const boots = await store.query<{ no: number; acked_seq: string }>(
    'select no, acked_seq from gateway_boots where gateway_id = $1',
    [gatewayId],
  )
  const findings: ProgramFindings = { stored: 0, wrong: [], lost: [], unread: 0 }
  const values = new Set<number>()
  for (const boot of boots) {
    const rows = await store.query<{ seq: string; temp_centi_c: number | null; flag: number }>(
      'select seq, temp_centi_c, flag from readings where boot_no = $1 order by seq',
      [boot.no],
    )
    const losses = await store.query<{ from_seq: string; to_seq: string }>(
      'select from_seq, to_seq from gateway_losses where boot_no = $1',
      [boot.no],
    )
    const seqs = new Set(rows.map((row) => Number(row.seq)))
    const isLost = (seq: number) =>
      losses.some((loss) => seq >= Number(loss.from_seq) && seq <= Number(loss.to_seq))
    for (let seq = 1; seq <= Number(boot.acked_seq); seq += 1)
      if (!seqs.has(seq) && !isLost(seq)) findings.lost.push(`program boot ${boot.no} reading ${seq}`)
    for (const { seq, temp_centi_c: value, flag } of rows) {
      findings.stored += 1
      if (value === null && flag > 0) continue
      const isKnown = value !== null && value < (answered + 1) * channelCount && !values.has(value)
      if (!isKnown) findings.wrong.push(`program boot ${boot.no} reading ${seq}: ${value}`)
      else values.add(value)
    }
    if (seqs.size !== rows.length) findings.wrong.push(`program boot ${boot.no}: a number is stored twice`)
  }
  findings.unread =
    answered * channelCount - [...values].filter((value) => value < answered * channelCount).length
  return findings
}
