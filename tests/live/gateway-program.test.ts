import { spawn } from 'node:child_process'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { afterAll, beforeAll, expect, it } from 'vitest'
import * as z from 'zod'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { gatewayConfigSchema } from '@/lib/gateway/config'
import { enrolGateway } from '@/lib/gateway/enrol'
import type { ChannelValue } from '@/lib/gateway/read-channel'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { createHearth, type HearthReading } from '@/simulators/hearth/hearth'
import { hearthModuleConfig } from '@/simulators/hearth/modbus-feed'
import { hearthRecipeOf } from '@/simulators/hearth/recipe-of-content'
import { startSimulatedModule } from '@/simulators/modbus/simulated-module'
import { callRoute } from '@/tests/support/api'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { LiveServer } from '@/tests/support/live-server'
import { startLiveServer } from '@/tests/support/live-server'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'
import { sampleContent } from '@/tests/support/recipe-content'
import { createTestProbe } from '@/tests/support/room'
import { until } from '@/tests/support/until'

/* The whole way: hearth engine, registers, Modbus TCP, the gateway program as a process, socket, ingest, database. */

const root = fileURLToPath(new URL('../../', import.meta.url))
const roles = ['lead', 'opposite', 'coals'] as const
const POLL_MS = 50

let database: TestDatabase
let people: TestPeople
let server: LiveServer
let folder = ''

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  server = await startLiveServer()
  folder = mkdtempSync(join(tmpdir(), 'emberstave-whole-way-'))
})

afterAll(async () => {
  await server.stop()
  await closeIngestPool()
  await closeOrm()
  await database.drop()
  rmSync(folder, { recursive: true })
})

async function post(path: string, body: unknown): Promise<unknown> {
  const answer = await callRoute('POST', path, { cookie: people.administrator.cookie, body })
  expect([200, 201], `${path}: ${answer.text}`).toContain(answer.status)
  return answer.json
}

/** As `fetch`, answered by the route handlers of this process. */
const request: typeof fetch = async (input, init) => {
  const asked = new Request(input, init)
  const answer = await callRoute(asked.method, new URL(asked.url).pathname, {
    headers: Object.fromEntries(asked.headers),
    body: await asked.text(),
  })
  return new Response(answer.text, { status: answer.status, headers: answer.headers })
}

/** A hearth over which a barrel is toasted; each question about its registers is answered with the next reading. */
async function startHearth(probes: { id: string; role: (typeof roles)[number] }[]) {
  const hearth = createHearth({ seed: 11, recipe: hearthRecipeOf(sampleContent()), startPhase: 'toasting' })
  const module = gatewayConfigSchema.shape.modules.element.parse(hearthModuleConfig(1, listed(probes), 1))
  const served: ChannelValue[][] = []
  let isLeadOpen = false
  let shown: ChannelValue[] = []
  const next = () => {
    shown = hearth.advance(1).readings.map((reading) => valueOf(reading, isLeadOpen))
    simulated.show(new Map(probes.map(({ id }, i) => [id, shown[i] ?? { flag: 'fault' }])))
  }
  const simulated = await startSimulatedModule({
    config: module,
    onAnswered: () => {
      served.push(shown)
      next()
    },
  })
  next()
  return { simulated, served, openLead: (isOpen: boolean) => (isLeadOpen = isOpen) }
}

function listed(probes: { id: string; role: (typeof roles)[number] }[]) {
  return probes.map((probe) => ({ ...probe, hearth: 1, thermocoupleType: 'K' as const }))
}

function valueOf({ probe, emf }: HearthReading, isLeadOpen: boolean): ChannelValue {
  return probe === 'lead' && isLeadOpen ? { flag: 'open' } : { emf }
}

function startProgram(configPath: string) {
  const child = spawn(process.execPath, ['--import', 'tsx', 'lib/gateway/main.ts', configPath], {
    cwd: root,
    env: { PATH: process.env['PATH'], NODE_ENV: process.env.NODE_ENV },
    stdio: ['ignore', 'pipe', 'pipe'],
  })
  let text = ''
  for (const stream of [child.stdout, child.stderr])
    stream.on('data', (part: Buffer) => (text += String(part)))
  const ended = new Promise<number | null>((resolve) => child.once('close', (code) => resolve(code)))
  return { child, ended, text: () => text }
}

type Row = {
  probe_no: number
  seq: string
  at_ms: string
  emf: number | null
  cold: number | null
  flag: number
}

/** The stored readings of each start of the program, oldest first. */
async function storedByBoot(gatewayId: string): Promise<Row[][]> {
  const rows = await queryRows<Row & { boot_no: number }>(
    await forkEm(),
    `select r.boot_no, r.probe_no, r.seq, r.at_ms, r.emf_tenth_uv as emf, r.cold_centi_c as cold, r.flag
       from readings r join gateway_boots b on b.no = r.boot_no
      where b.gateway_id = ? order by b.first_seen_at, b.no, r.seq`,
    [gatewayId],
  )
  return [...new Set(rows.map((row) => row.boot_no))].map((no) => rows.filter((row) => row.boot_no === no))
}

const flagCodes = { open: 1, short: 2, fault: 3 } as const

function asStored(values: readonly ChannelValue[], probeNos: readonly number[]) {
  return values.map(({ emf, flag }, i) => ({
    probe_no: probeNos[i],
    emf: emf === undefined ? null : Math.round(emf.microvolts * 10),
    cold: emf === undefined ? null : Math.round(emf.coldJunctionC * 100),
    flag: flag === undefined ? 0 : flagCodes[flag],
  }))
}

function measured(rows: readonly Row[]) {
  return rows.map(({ probe_no, emf, cold, flag }) => ({ probe_no, emf, cold, flag }))
}

it('what the hearth shows is in the database to the last digit, through enrolling, a fault, silence and kill −9', async () => {
  const gateway = z.looseObject({ id: z.string() }).parse(await post('/api/gateways', { name: 'Box 1' }))
  const made = await post(`/api/gateways/${gateway.id}/enrolment-codes`, {})
  const { code } = z.looseObject({ code: z.string() }).parse(made)
  const rows = await Promise.all(roles.map((_, i) => createTestProbe(gateway.id, i + 1)))
  const probeNos = rows.map(({ no }) => no)
  const probes = roles.map((role, i) => ({ role, id: rows[i]?.id ?? '' }))
  const { simulated, served, openLead } = await startHearth(probes)
  const configPath = join(folder, 'gateway.json')
  const module = { ...hearthModuleConfig(1, listed(probes), simulated.port), timeoutMs: 3_000 }
  writeFileSync(
    configPath,
    JSON.stringify({
      server: server.url,
      tokenFile: 'token',
      spool: { folder: 'spool' },
      pollIntervalMs: POLL_MS,
      modules: [module],
    }),
  )
  const enrolled = await enrolGateway({ configPath, code, name: 'the box', request })
  expect(enrolled.gatewayName).toBe('Box 1')

  const first = startProgram(configPath)
  await until(() => served.length >= 60)
  openLead(true)
  await until(() => served.length >= 80)
  openLead(false)
  await until(() => served.length >= 100)
  first.child.kill('SIGKILL')
  await first.ended
  const servedFirst = served.splice(0)

  const second = startProgram(configPath)
  await until(() => served.length >= 40)
  await simulated.behave({ kind: 'hang' })
  const faultCount = async () => {
    const boots = await storedByBoot(gateway.id)
    return (boots[1] ?? []).filter(({ flag }) => flag === flagCodes.fault).length
  }
  await until(async () => (await faultCount()) >= 3)
  await simulated.behave({ kind: 'normal' })
  const servedBefore = served.length
  await until(() => served.length >= servedBefore + 20)
  second.child.kill('SIGTERM')
  expect(await second.ended, second.text()).toBe(0)
  await simulated.close()

  const [firstBoot = [], secondBoot = []] = await storedByBoot(gateway.id)
  for (const boot of [firstBoot, secondBoot]) {
    expect(boot.map(({ seq }) => Number(seq))).toEqual(boot.map((_, i) => i + 1))
    const times = boot.map(({ at_ms }) => Number(at_ms))
    expect(times).toEqual([...times].sort((a, b) => a - b))
    expect(Math.abs(Date.now() - (times.at(-1) ?? 0))).toBeLessThan(60_000)
  }
  const expectedFirst = servedFirst.flatMap((values) => asStored(values, probeNos))
  const expectedSecond = served.flatMap((values) => asStored(values, probeNos))
  const withoutSilence = secondBoot.filter(({ flag }) => flag !== flagCodes.fault)
  // An answer that was under way when the program was killed or told to end is the only one that may be missing.
  expect(expectedFirst.length - firstBoot.length).toBeLessThanOrEqual(3)
  expect(expectedSecond.length - withoutSilence.length).toBeLessThanOrEqual(3)
  expect(measured(firstBoot)).toEqual(expectedFirst.slice(0, firstBoot.length))
  expect(measured(withoutSilence)).toEqual(expectedSecond.slice(0, withoutSilence.length))
  expect(firstBoot.filter(({ flag }) => flag === flagCodes.open).length).toBeGreaterThanOrEqual(10)
  expect(second.text()).toContain('does not answer')
  expect(second.text()).toContain('answers again')
}, 120_000)
