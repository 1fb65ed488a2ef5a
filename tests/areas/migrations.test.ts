import { randomBytes } from 'node:crypto'
import { Client, escapeIdentifier } from 'pg'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { migrateDown, migrateUp } from '@/lib/db/migrate'
import { migrationsList } from '@/migrations/list'
import {
  ensureTestCluster,
  onTestCluster,
  ownerUrlOf,
  TEST_DATABASE_PREFIX,
} from '@/tests/support/test-cluster'

const names = migrationsList.map((migration) => migration.name)
const database = `${TEST_DATABASE_PREFIX}${process.pid}_${randomBytes(4).toString('hex')}`
let url: string

beforeAll(async () => {
  await ensureTestCluster()
  url = ownerUrlOf(database)
  await onTestCluster((client) =>
    client.query(`create database ${escapeIdentifier(database)} template template0`),
  )
})

afterAll(async () => {
  await onTestCluster((client) =>
    client.query(`drop database if exists ${escapeIdentifier(database)} with (force)`),
  )
})

/** Everything that a migration makes, as sorted lines: columns, constraints, indexes, triggers, functions, grants. */
async function schemaLines(): Promise<string[]> {
  const client = new Client({ connectionString: url })
  await client.connect()
  try {
    const { rows } = await client.query<{ line: string }>(`
      select format('column %s.%s %s %s %s', table_name, column_name, data_type, is_nullable, column_default) as line
        from information_schema.columns where table_schema = 'public' and table_name <> 'migrations'
      union all select format('constraint %s %s %s', conrelid::regclass, conname, pg_get_constraintdef(oid))
        from pg_constraint where connamespace = 'public'::regnamespace and conrelid::regclass::text <> 'migrations'
      union all select format('index %s', indexdef) from pg_indexes
        where schemaname = 'public' and tablename <> 'migrations'
      union all select format('trigger %s', pg_get_triggerdef(oid)) from pg_trigger where not tgisinternal
      union all select format('function %s %s', oid::regprocedure, md5(prosrc)) from pg_proc
        where pronamespace = 'public'::regnamespace
          and not exists (select 1 from pg_depend where objid = pg_proc.oid and deptype = 'e')
      union all select format('grant %s %s %s', table_name, grantee, privilege_type)
        from information_schema.role_table_grants where table_schema = 'public' and table_name <> 'migrations'
      union all select format('sequence %s', sequencename) from pg_sequences
        where schemaname = 'public' and sequencename not like 'migrations%'
      order by 1`)
    return rows.map((row) => row.line)
  } finally {
    await client.end()
  }
}

it('the schema goes up from empty, down to empty, and up again to the same; a second run changes nothing', async () => {
  expect(await migrateUp(url)).toEqual(names)
  const whole = await schemaLines()
  expect(whole.length).toBeGreaterThan(200)
  expect(await migrateUp(url)).toEqual([])
  expect(await migrateDown(url, '0')).toEqual([...names].reverse())
  expect(await schemaLines()).toEqual([])
  await migrateUp(url)
  expect(await schemaLines()).toEqual(whole)
}, 120_000)

it('every earlier state goes up to the same schema, and a way down ends where the way up had been', async () => {
  const whole = await schemaLines()
  await migrateDown(url, '0')
  const states: string[][] = []
  for (const name of names) {
    states.push(await schemaLines())
    expect(await migrateUp(url, name)).toEqual([name])
    expect(await schemaLines()).not.toEqual(states.at(-1))
  }
  expect(await schemaLines()).toEqual(whole)
  for (const [index, name] of names.entries()) {
    await migrateDown(url, name)
    expect([name, await schemaLines()]).toEqual([name, states[index]])
    expect(await migrateUp(url)).toEqual(names.slice(index))
    expect([name, await schemaLines()]).toEqual([name, whole])
  }
}, 240_000)
