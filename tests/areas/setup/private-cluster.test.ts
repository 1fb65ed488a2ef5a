import { execFile, spawn } from 'node:child_process'
import {
  chmodSync,
  cpSync,
  existsSync,
  mkdirSync,
  mkdtempSync,
  readFileSync,
  rmSync,
  statSync,
  writeFileSync,
} from 'node:fs'
import net from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { promisify } from 'node:util'
import { afterAll, beforeAll, beforeEach, expect, it } from 'vitest'
import * as z from 'zod'

// A clone of nothing but the set-up scripts, in a folder of its own, so that what is broken here is nobody's.
const clone = mkdtempSync(join(tmpdir(), 'emberstave-setup-'))
const data = join(clone, '.data')
const folder = join(data, 'postgres-bench')
const execute = promisify(execFile)

const resultSchema = z.object({ port: z.number(), started: z.boolean(), rows: z.string() })

/** Starts the clone's cluster in a process of its own, runs SQL in it, and leaves it running. */
async function startAndAsk(sql: string): Promise<z.infer<typeof resultSchema>> {
  const script = `
    import { sayToStandardError } from './lib/setup/say.mjs'
    import { sql, startCluster } from './lib/setup/postgres.mjs'
    sayToStandardError()
    const cluster = await startCluster('bench')
    const rows = await sql(cluster, ${JSON.stringify(sql)})
    process.stdout.write(JSON.stringify({ port: cluster.port, started: cluster.started, rows }))`
  const { stdout } = await execute(process.execPath, ['--input-type=module', '-e', script], { cwd: clone })
  return resultSchema.parse(JSON.parse(stdout))
}

async function stop(): Promise<void> {
  const script = `
    import { startCluster, stopCluster } from './lib/setup/postgres.mjs'
    await stopCluster(await startCluster('bench'))`
  await execute(process.execPath, ['--input-type=module', '-e', script], { cwd: clone })
}

function postmasterPid(): number {
  return Number(readFileSync(join(folder, 'postmaster.pid'), 'utf8').split('\n')[0])
}

beforeAll(() => {
  chmodSync(clone, 0o711)
  mkdirSync(join(clone, 'lib'))
  cpSync(fileURLToPath(new URL('../../../lib/setup', import.meta.url)), join(clone, 'lib', 'setup'), {
    recursive: true,
  })
})

beforeEach(async () => {
  await startAndAsk('CREATE TABLE IF NOT EXISTS kept (n int)')
})

afterAll(async () => {
  await stop()
  rmSync(clone, { recursive: true, force: true })
})

it('a cluster listens on loopback alone, with no socket file, and is durable', async () => {
  const { rows } = await startAndAsk(
    `SELECT string_agg(name || '=' || setting, ' ' ORDER BY name) FROM pg_settings
      WHERE name IN ('fsync', 'synchronous_commit', 'full_page_writes', 'listen_addresses', 'unix_socket_directories')`,
  )
  expect(rows).toBe(
    'fsync=on full_page_writes=on listen_addresses=127.0.0.1 synchronous_commit=on unix_socket_directories=',
  )
})

it('the secrets are readable by their owner only', () => {
  expect(statSync(join(data, 'secrets.json')).mode & 0o777).toBe(0o600)
  expect(statSync(folder).mode & 0o777).toBe(0o700)
})

it('starting it twice is starting it once', async () => {
  const first = await startAndAsk('SELECT 1')
  const second = await startAndAsk('SELECT 1')
  expect(second).toEqual({ ...first, started: false })
})

it('two runs that start it at the same time both get it', async () => {
  await stop()
  const runs = await Promise.all([startAndAsk('SELECT 1'), startAndAsk('SELECT 1'), startAndAsk('SELECT 1')])
  expect(new Set(runs.map((run) => run.port)).size).toBe(1)
  expect(runs.filter((run) => run.started)).toHaveLength(1)
})

it('after a kill it comes back with what was committed', async () => {
  await startAndAsk('INSERT INTO kept VALUES (427)')
  process.kill(postmasterPid(), 'SIGKILL')
  expect(await startAndAsk('SELECT count(*) FROM kept WHERE n = 427')).toMatchObject({
    started: true,
    rows: '1',
  })
})

it("a stale postmaster.pid whose number is another program's by now does not stop it, nor that program", async () => {
  const { port } = await startAndAsk('SELECT 1')
  await stop()
  // The same user as the cluster's, which is what makes PostgreSQL itself refuse.
  const { uid, gid } = statSync(folder)
  const other = spawn(process.execPath, ['-e', 'setInterval(() => {}, 1000)'], {
    cwd: '/',
    uid,
    gid,
    stdio: 'ignore',
  })
  try {
    const started = Math.floor(Date.now() / 1000)
    writeFileSync(
      join(folder, 'postmaster.pid'),
      `${other.pid}\n${folder}\n${started}\n${port}\n\n127.0.0.1\n`,
    )
    expect(await startAndAsk('SELECT 1')).toMatchObject({ started: true, rows: '1' })
    expect(other.exitCode).toBeNull()
  } finally {
    other.kill()
  }
})

it('when its port was taken meanwhile it takes another and remembers it', async () => {
  const { port } = await startAndAsk('SELECT 1')
  await stop()
  const squatter = net.createServer()
  await new Promise<void>((resolve) => squatter.listen(port, '127.0.0.1', resolve))
  try {
    const moved = await startAndAsk('SELECT 1')
    expect(moved.port).not.toBe(port)
    expect(await startAndAsk('SELECT 1')).toMatchObject({ port: moved.port })
  } finally {
    squatter.close()
  }
})

it('when its secrets are lost it gets new passwords and keeps its rows', async () => {
  await startAndAsk('INSERT INTO kept VALUES (99)')
  rmSync(join(data, 'secrets.json'))
  expect(await startAndAsk('SELECT count(*) FROM kept WHERE n = 99')).toMatchObject({ rows: '1' })
})

it('a half-made cluster of an interrupted run is made anew', async () => {
  await stop()
  rmSync(folder, { recursive: true })
  mkdirSync(`${folder}.new`)
  writeFileSync(join(`${folder}.new`, 'PG_VERSION'), '15\n')
  expect(await startAndAsk('SELECT 1')).toMatchObject({ started: true, rows: '1' })
  expect(existsSync(`${folder}.new`)).toBe(false)
})
