import { execFile } from 'node:child_process'
import { promisify } from 'node:util'
import { Client } from 'pg'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { systemActor } from '@/lib/auth/actor'
import { closeOrm } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { sealSha256 } from '@/lib/ingest/read-sealed'
import { decodeReadings, encodeReadings } from '@/lib/ingest/seal-codec'
import { sealFiring } from '@/lib/ingest/seal-firing'
import { verifySeals } from '@/lib/ingest/verify-seals'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { Fire } from '@/tests/support/fire'
import { makeFire } from '@/tests/support/fire'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'
import { endTestFiring } from '@/tests/support/room'

let database: TestDatabase
let people: TestPeople
let owner: Client
let fire: Fire

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  owner = new Client({ connectionString: database.ownerUrl })
  await owner.connect()
  for (let i = 0; i < 3; i += 1) {
    const one = await makeFire(people, Math.floor(Date.now() / 1000) * 1000 - 600_000)
    await one.send(one.readings(0, 60))
    await endTestFiring(one.firing.id, new Date(one.toastMs + 60_000))
    await sealFiring(one.firing.id)
    fire = one
  }
})

afterAll(async () => {
  await owner.end()
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

const actor = systemActor('test')

type Seal = { data: Buffer; sha256: string; reading_count: number }

async function leadSeal(): Promise<Seal> {
  const { rows } = await owner.query<Seal>(
    'select data, sha256, reading_count from seals where firing_id = $1 and probe_id = $2',
    [fire.firing.id, fire.lead.id],
  )
  const [seal] = rows
  if (seal === undefined) throw new Error('the firing has no seal')
  return seal
}

/** What nobody can do by accident: as the owner, with the guard switched off. Gives what puts it back. */
async function force(column: string, value: unknown): Promise<() => Promise<void>> {
  const set = async (to: unknown) => {
    await owner.query('alter table seals disable trigger seals_append_only')
    await owner.query(`update seals set ${column} = $1 where firing_id = $2 and probe_id = $3`, [
      to,
      fire.firing.id,
      fire.lead.id,
    ])
    await owner.query('alter table seals enable trigger seals_append_only')
  }
  const { rows } = await owner.query<Record<string, unknown>>(
    `select ${column} as value from seals where firing_id = $1 and probe_id = $2`,
    [fire.firing.id, fire.lead.id],
  )
  await set(value)
  return () => set(rows[0]?.['value'])
}

it('seals that hold are counted with their firings, readings and bytes', async () => {
  const found = await verifySeals(actor)
  expect(found).toMatchObject({ seals: 6, firings: 3, readings: 3 * 2 * 300, bad: [] })
  expect(found.bytes).toBeGreaterThan(1_000)
})

it.each([
  [
    'a byte that was changed',
    'data',
    (seal: Seal) => flipped(seal.data),
    'its bytes do not fit its checksum',
  ],
  ['another checksum', 'sha256', () => '0'.repeat(64), 'its bytes do not fit its checksum'],
  ['a count that is not so', 'reading_count', () => 299, 'it holds another count than it says'],
  ['an encoding of another time', 'encoding', () => 9, 'encoding 9 is not known here'],
  ['another span', 'to_ms', (_seal: Seal) => fire.toastMs + 1_000, 'readings of another time than it says'],
])('%s is found and named with its firing', async (_what, column, change, reason) => {
  const restore = await force(column, change(await leadSeal()))
  try {
    const { bad, seals } = await verifySeals(actor)
    expect(seals).toBe(6)
    expect(bad).toEqual([
      {
        firingId: fire.firing.id,
        serial: expect.stringMatching(/^TST-/),
        revision: 1,
        probeName: 'Bilge A',
        reason: expect.stringContaining(reason),
      },
    ])
  } finally {
    await restore()
  }
})

it('bytes that do not decode, and readings out of order, are found though their checksum fits', async () => {
  const { data } = await leadSeal()
  const columns = decodeReadings(data)
  const backwards = encodeReadings({ ...columns, atMs: columns.atMs.toReversed() })
  for (const [bytes, reason] of [
    [data.subarray(0, data.length / 2), /./],
    [backwards, /not in order of time/],
  ] as const) {
    const restoreData = await force('data', bytes)
    const restoreSum = await force('sha256', sealSha256(bytes))
    try {
      expect((await verifySeals(actor)).bad).toMatchObject([
        { firingId: fire.firing.id, reason: expect.stringMatching(reason) },
      ])
    } finally {
      await restoreData()
      await restoreSum()
    }
  }
})

it('a revision that is missing is found', async () => {
  const restore = await force('revision', 3)
  try {
    expect((await verifySeals(actor)).bad).toMatchObject([{ revision: 3, reason: 'revision 2 is missing' }])
  } finally {
    await restore()
  }
})

it('only who may read the audit trail may verify seals', async () => {
  await expect(verifySeals(people.toaster.actor)).rejects.toMatchObject({ kind: 'not allowed' })
})

it('the command prints the count and ends with status 0, and names the bad one and ends with status 1', async () => {
  const sound = await runCommand()
  expect(sound).toMatchObject({ code: 0, stderr: '' })
  expect(sound.stdout).toMatch(
    /^6 seals of 3 firings hold 1800 readings, [\d.]+ bytes a reading\.\nEvery seal holds\.\n$/,
  )
  const restore = await force('data', flipped((await leadSeal()).data))
  try {
    const broken = await runCommand()
    expect(broken.code).toBe(1)
    expect(broken.stderr).toContain(`firing ${fire.firing.id}, revision 1, Bilge A: its bytes do not fit`)
    expect(broken.stderr).toContain('1 of them do not hold')
  } finally {
    await restore()
  }
}, 120_000)

function flipped(data: Buffer): Buffer {
  const changed = Buffer.from(data)
  changed.writeUInt8((changed.readUInt8(20) ^ 1) & 0xff, 20)
  return changed
}

/** As `npm run seals:verify` runs it: a program of its own, given the database's address. */
async function runCommand(): Promise<{ code: number; stdout: string; stderr: string }> {
  const env: NodeJS.ProcessEnv = {
    NODE_ENV: 'test',
    PATH: process.env['PATH'],
    DATABASE_URL: database.databaseUrl,
  }
  const args = ['--import', 'tsx', 'lib/ingest/verify-seals-command.ts']
  try {
    const { stdout, stderr } = await promisify(execFile)(process.execPath, args, { env })
    return { code: 0, stdout, stderr }
  } catch (error) {
    const [code, stdout, stderr] = ['code', 'stdout', 'stderr'].map((key) => Reflect.get(Object(error), key))
    return { code: Number(code), stdout: String(stdout), stderr: String(stderr) }
  }
}
