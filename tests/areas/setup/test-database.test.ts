import { Client } from 'pg'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { createTestDatabase } from '@/tests/support/database'
import type { TestDatabase } from '@/tests/support/database'

const made: TestDatabase[] = []

async function query(connectionString: string, text: string): Promise<Record<string, unknown>[]> {
  const client = new Client({ connectionString })
  await client.connect()
  try {
    return (await client.query<Record<string, unknown>>(text)).rows
  } finally {
    await client.end()
  }
}

beforeAll(async () => {
  made.push(await createTestDatabase(), await createTestDatabase())
})

afterAll(async () => {
  for (const one of made) await one.drop()
})

it('a test database has every migration', async () => {
  for (const { ownerUrl } of made) {
    const tables = await query(ownerUrl, `SELECT tablename FROM pg_tables WHERE schemaname = 'public'`)
    expect(tables.map((row) => row.tablename)).toContain('firings')
  }
})

it('two test databases are apart', async () => {
  const [one, two] = made
  if (!one || !two) throw new Error('both databases were made')
  await query(one.ownerUrl, 'CREATE TABLE only_here (id int)')
  await expect(query(two.ownerUrl, 'SELECT * FROM only_here')).rejects.toThrow('does not exist')
})

it("the server's role is no superuser, makes no tables and cannot drop what the owner made", async () => {
  const [one] = made
  if (!one) throw new Error('a database was made')
  const roles = await query(
    one.databaseUrl,
    'SELECT rolsuper, rolcreatedb FROM pg_roles WHERE rolname = current_user',
  )
  expect(roles).toEqual([{ rolsuper: false, rolcreatedb: false }])
  await expect(query(one.databaseUrl, 'CREATE TABLE mine (id int)')).rejects.toThrow('permission denied')
  await expect(query(one.databaseUrl, 'DROP TABLE firings')).rejects.toThrow('must be owner')
})

it('the test cluster still answers commits in order, though it does not sync to disk', async () => {
  const [one] = made
  if (!one) throw new Error('a database was made')
  expect(await query(one.databaseUrl, 'SHOW synchronous_commit')).toEqual([{ synchronous_commit: 'on' }])
})
