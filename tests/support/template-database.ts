import { createHash } from 'node:crypto'
import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import type { Client } from 'pg'
import { escapeIdentifier, escapeLiteral } from 'pg'
import {
  ensureTestCluster,
  onTestCluster,
  ownerUrlOf,
  TEST_DATABASE_PREFIX,
} from '@/tests/support/test-cluster'

const TEMPLATE_PREFIX = 'emberstave_template_'
// Any number of our own: it keeps two runs from building the same template at once.
const TEMPLATE_LOCK = 6_032_001
const STALE_AFTER_MS = 24 * 3600 * 1000

/** vitest's global set-up: a migrated template once, for every test file to clone. */
export default async function setup(): Promise<void> {
  await prepareTemplateDatabase()
}

/**
 * Makes sure that a template database with the present migrations is in the test cluster, and names it in
 * `TEST_DATABASE_TEMPLATE`. It stays for the next run; a change of a migration makes a new one.
 */
export async function prepareTemplateDatabase(): Promise<void> {
  await ensureTestCluster()
  const template = `${TEMPLATE_PREFIX}${migrationsHash()}`
  await onTestCluster(async (client) => {
    await client.query('SELECT pg_advisory_lock($1)', [TEMPLATE_LOCK])
    await dropLeftovers(client, template)
    if (!(await databaseNames(client)).includes(template)) await buildTemplate(client, template)
  })
  process.env.TEST_DATABASE_TEMPLATE = template
}

async function buildTemplate(client: Client, template: string): Promise<void> {
  // Built under another name and renamed when whole: an interrupted run leaves nothing that looks finished.
  const building = `${template}_building`
  await client.query(`DROP DATABASE IF EXISTS ${escapeIdentifier(building)} WITH (FORCE)`)
  await client.query(`CREATE DATABASE ${escapeIdentifier(building)} TEMPLATE template0 STRATEGY FILE_COPY`)
  const { migrateUp } = await import('@/lib/db/migrate')
  await migrateUp(ownerUrlOf(building))
  await client.query(`ALTER DATABASE ${escapeIdentifier(building)} RENAME TO ${escapeIdentifier(template)}`)
  const madeAt = new Date().toISOString()
  await client.query(`COMMENT ON DATABASE ${escapeIdentifier(template)} IS ${escapeLiteral(madeAt)}`)
}

/** Removes what no living run needs: databases of test processes that are gone, and templates of yesterday. */
async function dropLeftovers(client: Client, current: string): Promise<void> {
  const names = await databaseNames(client)
  const abandoned = names.filter((name) => {
    const maker = /^emberstave_test_(\d+)_/.exec(name)?.[1]
    return name.startsWith(TEST_DATABASE_PREFIX) && maker !== undefined && !isAlive(Number(maker))
  })
  const templates = await client.query<{ name: string; made: string | null }>(
    `SELECT datname AS name, shobj_description(oid, 'pg_database') AS made
       FROM pg_database WHERE datname LIKE $1 AND datname <> $2`,
    [`${TEMPLATE_PREFIX.replaceAll('_', '\\_')}%`, current],
  )
  const old = templates.rows.filter(
    ({ made }) => made === null || Date.now() - Date.parse(made) > STALE_AFTER_MS,
  )
  for (const name of [...abandoned, ...old.map((row) => row.name)]) {
    await client.query(`DROP DATABASE IF EXISTS ${escapeIdentifier(name)} WITH (FORCE)`)
  }
}

async function databaseNames(client: Client): Promise<string[]> {
  const { rows } = await client.query<{ name: string }>('SELECT datname AS name FROM pg_database')
  return rows.map((row) => row.name)
}

function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0)
    return true
  } catch (error) {
    // Not permitted to signal it: it lives, as another user.
    return error instanceof Error && 'code' in error && error.code === 'EPERM'
  }
}

/** Twelve hexadecimal digits over everything that decides the schema. */
function migrationsHash(): string {
  const root = fileURLToPath(new URL('../..', import.meta.url))
  const hash = createHash('sha256')
  const migrations = readdirSync(join(root, 'migrations'), { recursive: true, encoding: 'utf8' })
  const files = migrations.filter((name) => /\.(ts|sql)$/.test(name)).map((name) => join('migrations', name))
  for (const file of [...files.sort(), join('lib', 'db', 'migrate.ts')]) {
    hash
      .update(`${file}\0`)
      .update(readFileSync(join(root, file)))
      .update('\0')
  }
  return hash.digest('hex').slice(0, 12)
}
