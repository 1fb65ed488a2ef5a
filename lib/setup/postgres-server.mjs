import {
  chownSync,
  existsSync,
  readFileSync,
  renameSync,
  rmSync,
  statSync,
  truncateSync,
  writeFileSync,
} from 'node:fs'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { keptPort } from './ports.mjs'
import { clusterMajor, emptyFolder, runningServer } from './postgres-folder.mjs'
import { run, tail } from './run.mjs'
import { say, SetupError } from './say.mjs'

const OWN_SETTINGS = 'emberstave.conf'
const LOG = 'server.log'
const LOG_LIMIT_BYTES = 5_000_000

/** Settings of every cluster: loopback alone, and no socket file that a build could stumble over. */
function settings(port, fast, major) {
  // After a kill every file is written to disk before anything else: by one call, not file by file.
  const recovery = major >= 14 && process.platform === 'linux' ? ['recovery_init_sync_method = syncfs'] : []
  const durable = [
    ...recovery,
    'fsync = on',
    'full_page_writes = on',
    'wal_level = replica',
    'max_connections = 100',
  ]
  const forTests = [
    'fsync = off',
    'full_page_writes = off',
    'wal_level = minimal',
    'max_wal_senders = 0',
    'max_connections = 300',
  ]
  return [
    `port = ${port}`,
    `listen_addresses = '127.0.0.1'`,
    `unix_socket_directories = ''`,
    'password_encryption = scram-sha-256',
    'synchronous_commit = on',
    ...(fast ? forTests : durable),
    'shared_buffers = 256MB',
    'max_wal_size = 2GB',
    'checkpoint_timeout = 15min',
    // Short queries over small tables: compiling them costs more than it saves.
    'jit = off',
    `timezone = 'UTC'`,
    `log_timezone = 'UTC'`,
    `log_line_prefix = '%m [%p] %q%u@%d '`,
    '',
  ].join('\n')
}

// Only for this machine's own connections, and always with a password.
const ACCESS = 'host all all 127.0.0.1/32 scram-sha-256\n'

/** Makes the cluster beside its place and moves it there whole, so that an interrupted run leaves no half of one. */
export async function makeCluster({ name, folder, user, bin, passwords }) {
  say(`making the ${name} database cluster`)
  const draft = `${folder}.new`
  emptyFolder(draft, user)
  const secret = `${folder}.password`
  writeFileSync(secret, passwords.superuser, { mode: 0o600 })
  if (user.uid !== undefined) chownSync(secret, user.uid, user.gid)
  const access = ['-U', 'postgres', `--pwfile=${secret}`, '-A', 'scram-sha-256']
  const words = ['-E', 'UTF8', '--locale=C.UTF-8', '--no-instructions', '--no-sync']
  const made = await run(join(bin, 'initdb'), ['-D', draft, ...access, ...words], { cwd: '/', ...user })
  rmSync(secret, { force: true })
  if (made.code !== 0) {
    rmSync(draft, { recursive: true, force: true })
    throw new SetupError(
      `PostgreSQL could not make a database cluster in ${folder}.`,
      tail(made.stderr || made.stdout),
    )
  }
  writeFileSync(join(draft, 'pg_hba.conf'), ACCESS)
  const main = join(draft, 'postgresql.conf')
  writeFileSync(main, `${readFileSync(main, 'utf8')}\ninclude = '${OWN_SETTINGS}'\n`)
  rmSync(folder, { recursive: true, force: true })
  renameSync(draft, folder)
}

export function removeCluster(folder) {
  rmSync(folder, { recursive: true, force: true })
}

/**
 * Starts the server, on a new port when the remembered one was taken in the meantime.
 *
 * @returns {Promise<number>} its port
 */
export async function startServer(cluster, { fast }) {
  const { name, folder, user, bin } = cluster
  const log = join(folder, LOG)
  const taken = []
  for (let tries = 0; tries < 20; tries += 1) {
    const port = await keptPort(`postgres-${name}`, { avoid: taken })
    writeOwned(join(folder, OWN_SETTINGS), settings(port, fast, clusterMajor(folder)), user)
    if (existsSync(log) && statSync(log).size > LOG_LIMIT_BYTES) truncateSync(log)
    const logStart = existsSync(log) ? statSync(log).size : 0
    say(`starting PostgreSQL (${name}) on 127.0.0.1:${port}`)
    const result = await run(join(bin, 'pg_ctl'), ['-D', folder, '-l', log, '-w', '-t', '300', 'start'], {
      cwd: '/',
      ...user,
    })
    if (result.code === 0) return port
    const said = existsSync(log) ? readFileSync(log, 'utf8').slice(logStart) : result.stderr
    if (/could not bind|Address already in use/.test(said)) taken.push(port)
    // Backends of a server that was killed live on for a moment and hold its memory.
    else if (/shared memory block .* is still in use|lock file .* already exists/.test(said))
      await sleep(1000)
    else throw new SetupError(`PostgreSQL (${name}) did not start.`, `${tail(said)}\nIts log is ${log}.`)
  }
  throw new SetupError(`PostgreSQL (${name}) did not start after several tries.`, `Read ${log}.`)
}

export async function stopServer({ name, folder, user, bin }) {
  if (runningServer(folder) === null) return
  const result = await run(join(bin, 'pg_ctl'), ['-D', folder, '-m', 'fast', '-w', '-t', '60', 'stop'], {
    cwd: '/',
    ...user,
  })
  if (result.code !== 0 && runningServer(folder) !== null) {
    throw new SetupError(`PostgreSQL (${name}) did not stop.`, tail(result.stderr || result.stdout))
  }
}

/** Sets the superuser's password to the kept one, in PostgreSQL's single-user mode; the server must be stopped. */
export async function resetSuperuserPassword({ folder, user, bin, passwords }) {
  const statement = `ALTER ROLE postgres PASSWORD '${passwords.superuser}'\n`
  const result = await run(join(bin, 'postgres'), ['--single', '-D', folder, 'postgres'], {
    cwd: '/',
    ...user,
    input: statement,
  })
  if (result.code !== 0)
    throw new SetupError('The password of the database could not be set anew.', tail(result.stderr))
}

function writeOwned(path, text, user) {
  writeFileSync(path, text, { mode: 0o600 })
  if (user.uid !== undefined) chownSync(path, user.uid, user.gid)
}
