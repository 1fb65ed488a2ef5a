import { execFile } from 'node:child_process'
import { promisify } from 'node:util'
import pg from 'pg'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { listEntries } from '@/lib/audit/list-entries'
import { auditQuery } from '@/lib/audit/schema'
import { verifyChain } from '@/lib/audit/verify-chain'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import { systemActor } from '@/lib/auth/actor'
import { closeOrm, forkEm, inTransaction, queryRows } from '@/lib/db/orm'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  for (let number = 1; number <= 12; number += 1) await write(number)
})

afterAll(async () => {
  await closeOrm()
  await database.drop()
})

const system = systemActor('test')

async function write(number: number) {
  await inTransaction((em) =>
    writeAuditEntry(
      em,
      people.masterCooper.actor,
      'thing.changed',
      { type: 'thing', id: String(number) },
      {
        number,
        words: 'café “quoted” \\ 1e400',
        nested: { b: 1, a: [null, true, 0.1] },
      },
    ),
  )
}

async function asOwner<T>(work: (client: pg.Client) => Promise<T>): Promise<T> {
  const client = new pg.Client({ connectionString: database.ownerUrl })
  await client.connect()
  try {
    return await work(client)
  } finally {
    await client.end()
  }
}

/** What nobody can do by accident: switches the guard off as the owner, changes, switches it on again. */
async function force(sql: string, parameters: unknown[] = []) {
  await asOwner(async (client) => {
    await client.query('alter table audit_entries disable trigger audit_entries_append_only')
    await client.query(sql, parameters)
    await client.query('alter table audit_entries enable trigger audit_entries_append_only')
  })
}

describe('the database refuses a change of the trail', () => {
  test.each(['update audit_entries set actor_name = ?', 'delete from audit_entries where actor_name <> ?'])(
    'by the application: %s',
    async (sql) => {
      await expect(queryRows(await forkEm(), sql, ['x'])).rejects.toThrow(/permission denied/)
    },
  )

  test.each([
    `update audit_entries set actor_name = 'x'`,
    'delete from audit_entries',
    'truncate audit_entries',
  ])('even by the owner: %s', async (sql) => {
    await expect(asOwner((client) => client.query(sql))).rejects.toThrow(/append-only/)
  })

  test('and numbers and hashes entries itself, whatever an insert says', async () => {
    await asOwner((client) =>
      client.query(
        `insert into audit_entries (seq, at, actor_name, action, subject_type, subject_id, previous_hash, hash)
         values (999, now(), 'x', 'thing.forged', 'thing', '1', repeat('a', 64), repeat('b', 64))`,
      ),
    )
    expect(await verifyChain(system)).toMatchObject({ entries: 13, isIntact: true, firstBrokenSeq: null })
  })
})

describe('the verification', () => {
  test('holds after writes of many at once', async () => {
    await Promise.all(Array.from({ length: 8 }, (_, number) => write(100 + number)))
    expect(await verifyChain(system)).toMatchObject({ entries: 21, isIntact: true })
  })

  test('finds a forced change of any column, and names the entry', async () => {
    const changes = [
      `actor_name = 'Somebody Else'`,
      `at = at + interval '1 microsecond'`,
      `detail = detail || '{"number": 7.5}'`,
      `subject_id = '8'`,
      `actor_id = null`,
      `action = 'thing.unchanged'`,
      `hash = repeat('0', 64)`,
      `previous_hash = repeat('0', 64)`,
    ]
    for (const change of changes) {
      const [before] = await queryRows<Record<string, unknown>>(
        await forkEm(),
        'select actor_name, at::text, detail::text, subject_id, actor_id, action, hash, previous_hash from audit_entries where seq = 7',
      )
      await force(`update audit_entries set ${change} where seq = 7`)
      expect(await verifyChain(system), change).toMatchObject({
        isIntact: false,
        firstBrokenSeq: 7,
        entries: 6,
      })
      await force(
        `update audit_entries set actor_name = $1, at = $2, detail = $3, subject_id = $4, actor_id = $5, action = $6,
                hash = $7, previous_hash = $8 where seq = 7`,
        Object.values(before ?? {}),
      )
      expect(await verifyChain(system), 'put back').toMatchObject({ isIntact: true })
    }
  })

  test('finds an entry whose hash was made anew with its change: the next one does not name it', async () => {
    const [before] = await queryRows<{ actor_name: string; hash: string }>(
      await forkEm(),
      'select actor_name, hash from audit_entries where seq = 5',
    )
    await force(`update audit_entries set actor_name = 'Forger' where seq = 5`)
    await force(
      `update audit_entries e set hash = encode(sha256(convert_to(audit_payload(e), 'UTF8')), 'hex') where seq = 5`,
    )
    expect(await verifyChain(system)).toMatchObject({ isIntact: false, firstBrokenSeq: 6 })
    await force('update audit_entries set actor_name = $1, hash = $2 where seq = 5', [
      before?.actor_name,
      before?.hash,
    ])
  })

  test('finds an end that was cut off, by an entry noted before', async () => {
    const noted = await verifyChain(system)
    const anchor = { seq: noted.entries, hash: noted.lastHash }
    await write(200)
    expect(await verifyChain(system, anchor)).toMatchObject({ isIntact: true })
    await force('delete from audit_entries where seq >= $1', [anchor.seq])
    expect(await verifyChain(system)).toMatchObject({ isIntact: true })
    expect(await verifyChain(system, anchor)).toMatchObject({ isIntact: false, firstBrokenSeq: anchor.seq })
  })

  test('finds an entry that was taken out', async () => {
    const command = await runCommand()
    expect(command.code).toBe(0)
    expect(command.stdout).toContain('The audit trail holds')
    await force('delete from audit_entries where seq = 3')
    expect(await verifyChain(system)).toMatchObject({ isIntact: false, firstBrokenSeq: 3, entries: 2 })
    const broken = await runCommand()
    expect(broken.code).toBe(1)
    expect(broken.stdout).toContain('broken at entry 3')
  }, 120_000)
})

/** The command as `npm run audit:verify` runs it: a program of its own, given the database's address. */
async function runCommand(): Promise<{ code: number; stdout: string }> {
  const env: NodeJS.ProcessEnv = {
    NODE_ENV: 'test',
    PATH: process.env['PATH'],
    HOME: process.env['HOME'],
    DATABASE_URL: database.databaseUrl,
  }
  try {
    const done = await promisify(execFile)(
      process.execPath,
      ['--import', 'tsx', 'lib/audit/verify-command.ts'],
      { env },
    )
    return { code: 0, stdout: done.stdout }
  } catch (error) {
    const code = Number(Reflect.get(Object(error), 'code'))
    return { code, stdout: String(Reflect.get(Object(error), 'stderr')) }
  }
}

describe('the list', () => {
  const list = (query: object) => listEntries(people.masterCooper.actor, auditQuery.parse(query))

  test('is newest first, filtered by person, action and its beginning, subject and day', async () => {
    const all = await list({ limit: 200 })
    const seqs = all.items.map((entry) => entry.seq)
    expect(seqs).toEqual([...seqs].sort((a, b) => b - a))
    expect((await list({ actor: 'bole' })).items.length).toBeGreaterThan(5)
    expect((await list({ actor: 'nobody' })).items).toEqual([])
    expect((await list({ action: 'thing' })).items.length).toBeGreaterThan(5)
    expect((await list({ action: 'thi' })).items).toEqual([])
    const one = await list({ subjectType: 'thing', subjectId: '9' })
    expect(one.items.map((entry) => entry.subjectId)).toEqual(['9'])
    expect((await list({ to: '2001-01-01' })).items).toEqual([])
    expect((await list({ from: '2001-01-01', to: '2101-01-01', limit: 200 })).items).toHaveLength(seqs.length)
  })

  test('pages without a hole or a double', async () => {
    const seen: number[] = []
    let cursor: string | undefined
    do {
      const page = await list({ limit: 3, cursor })
      seen.push(...page.items.map((entry) => entry.seq))
      cursor = page.nextCursor ?? undefined
    } while (cursor !== undefined)
    expect(new Set(seen).size).toBe(seen.length)
    expect(seen).toEqual((await list({ limit: 200 })).items.map((entry) => entry.seq))
  })

  test('is not for chemists, toasters or customers', async () => {
    for (const person of [people.chemist, people.toaster, people.customer]) {
      await expect(listEntries(person.actor, auditQuery.parse({}))).rejects.toMatchObject({
        kind: 'not allowed',
      })
      await expect(verifyChain(person.actor)).rejects.toMatchObject({ kind: 'not allowed' })
    }
  })
})
