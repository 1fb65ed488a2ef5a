import { mkdtempSync, readFileSync, rmSync, statSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, expect, it } from 'vitest'
import type { Reading } from '@/lib/gateway/protocol'
import type { DemoGateway } from '@/simulators/hearth/demo-file'
import { createFaultBoard, faultOrderSchema } from '@/simulators/hearth/fault-board'
import type { HearthReading } from '@/simulators/hearth/hearth'
import { startModbusFedGateway } from '@/simulators/hearth/modbus-feed'
import type { IngestServer } from '@/tests/support/ingest-server'
import { startIngestServer } from '@/tests/support/ingest-server'
import { until } from '@/tests/support/until'

const LEAD_1 = '8f14e45f-ceea-467f-a1b2-0c5d6e7f8a01'
const LEAD_2 = '8f14e45f-ceea-467f-a1b2-0c5d6e7f8a02'
const COALS_2 = '8f14e45f-ceea-467f-a1b2-0c5d6e7f8a03'

const demo: DemoGateway = {
  id: 'box-1',
  name: 'Box 1',
  token: 'emb_demo-token',
  hearths: [1, 2],
  probes: [
    { id: LEAD_1, hearth: 1, role: 'lead', thermocoupleType: 'K' },
    { id: LEAD_2, hearth: 2, role: 'lead', thermocoupleType: 'K' },
    { id: COALS_2, hearth: 2, role: 'coals', thermocoupleType: 'N' },
  ],
}

let folder = ''
let server: IngestServer
let stop: () => Promise<void> = () => Promise.resolve()
beforeEach(async () => {
  folder = mkdtempSync(join(tmpdir(), 'emberstave-feed-'))
  server = await startIngestServer()
})
afterEach(async () => {
  await stop()
  await server.close()
  rmSync(folder, { recursive: true })
})

function reading(probe: HearthReading['probe'], microvolts: number): HearthReading {
  return { probe, timeS: 0, emf: { microvolts, coldJunctionC: 24.5 } }
}

it('fed by Modbus, each hearth has its module, the gateway program reads them all, and faults on command come true', async () => {
  const board = createFaultBoard(Date.now)
  const said: string[] = []
  const gateway = await startModbusFedGateway({
    demo,
    serverUrl: server.url,
    spoolDir: folder,
    board,
    say: (line) => said.push(line),
  })
  stop = gateway.stop
  const record = (lead: number) =>
    gateway.record(
      new Map([
        [1, [reading('lead', lead)]],
        [2, [{ ...reading('lead', 1), flag: 'open' as const }, reading('coals', 21_345.6)]],
      ]),
    )
  const newest = () => {
    const last = new Map<string, Reading>()
    for (const message of server.messages) for (const one of message.readings) last.set(one.probeId, one)
    return last
  }
  record(7_001.3)
  await until(() => newest().get(LEAD_1)?.emf?.microvolts === 7_001.3)
  await until(() => newest().get(LEAD_2)?.flag === 'open')
  expect(newest().get(COALS_2)?.emf).toEqual({ microvolts: 21_345.6, coldJunctionC: 24.5 })
  expect(statSync(join(folder, 'box-1-modbus', 'token')).mode & 0o777).toBe(0o600)
  expect(readFileSync(join(folder, 'box-1-modbus', 'gateway.json'), 'utf8')).not.toContain(demo.token)

  board.begin(faultOrderSchema.parse({ hearth: 1, kind: 'module off', forS: 1 }))
  record(7_002)
  await until(() => newest().get(LEAD_1)?.flag === 'fault')
  expect(newest().get(COALS_2)?.flag).toBeUndefined()
  await until(() => !board.isActive('module off', [1]))
  record(7_003)
  await until(() => newest().get(LEAD_1)?.emf?.microvolts === 7_003)

  await gateway.restart()
  await until(() => server.kept.size === 2)
  await gateway.stop()
  for (const numbers of server.kept.values()) expect(Math.max(...numbers)).toBe(numbers.size)
  expect(said.join('\n')).toContain('Box 1: ')
  expect(said.join('\n')).not.toContain(demo.token)
})
