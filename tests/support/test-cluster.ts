import { Client } from 'pg'
import * as z from 'zod'
import { APP_ROLE, startCluster } from '@/lib/setup/postgres.mjs'
import { testDatabaseEnvironment } from '@/lib/setup/test-environment.mjs'

const clusterSchema = z.object({
  TEST_DATABASE_ADMIN_URL: z.url(),
  TEST_APP_ROLE_PASSWORD: z.string().min(1),
})

/** Names of a run's own databases; the number is the process that made it, so that leftovers can be told. */
export const TEST_DATABASE_PREFIX = 'emberstave_test_'

/**
 * The cluster that tests use, from the environment; `npm test` sets it. When a runner was started without it, the
 * clone's test cluster is started (and left running for the next run) and the environment is set for the workers.
 */
export async function ensureTestCluster(): Promise<void> {
  if (process.env.TEST_DATABASE_ADMIN_URL) return
  Object.assign(process.env, testDatabaseEnvironment(await startCluster('test', { fast: true })))
}

/** An address in the test cluster for the role that owns the databases and may create them. */
export function ownerUrlOf(database: string): string {
  const url = new URL(clusterSchema.parse(process.env).TEST_DATABASE_ADMIN_URL)
  url.pathname = `/${database}`
  return url.toString()
}

/** An address in the test cluster for the server's own role, which owns nothing. */
export function appUrlOf(database: string): string {
  const url = new URL(ownerUrlOf(database))
  url.username = APP_ROLE
  url.password = clusterSchema.parse(process.env).TEST_APP_ROLE_PASSWORD
  return url.toString()
}

/** Runs `work` on one connection to the cluster's `postgres` database, which is closed afterwards. */
export async function onTestCluster<T>(work: (client: Client) => Promise<T>): Promise<T> {
  const client = new Client({ connectionString: ownerUrlOf('postgres') })
  await client.connect()
  try {
    return await work(client)
  } finally {
    await client.end()
  }
}
