import {
  chmodSync,
  chownSync,
  mkdirSync,
  readFileSync,
  readlinkSync,
  realpathSync,
  rmSync,
  statSync,
} from 'node:fs'
import { dirname, join } from 'node:path'
import { cloneHash, dataDir, isRoot, makeDataDir, root } from './paths.mjs'
import { keep, readKept } from './kept.mjs'
import { run } from './run.mjs'
import { SetupError } from './say.mjs'

/** The user that PostgreSQL runs as: it refuses root. `{}` means this very user. */
async function clusterUser(folder) {
  if (!isRoot) return {}
  const owner = statSync(folder, { throwIfNoEntry: false })
  if (owner && owner.uid !== 0) return { uid: owner.uid, gid: owner.gid }
  const [uid, gid] = await Promise.all([run('id', ['-u', 'postgres']), run('id', ['-g', 'postgres'])])
  if (uid.code !== 0 || gid.code !== 0) {
    throw new SetupError(
      'PostgreSQL refuses to run as root, and there is no user “postgres” to run it as.',
      'Make one: adduser --system --group --no-create-home postgres',
    )
  }
  return { uid: Number(uid.stdout), gid: Number(gid.stdout) }
}

/** Whether that user can pass through every folder on the way to `.data`. */
async function reaches(user, folder) {
  if (user.uid === undefined) return true
  return (await run('test', ['-x', folder], { cwd: '/', ...user })).code === 0
}

/**
 * Where a cluster lies, and as whom it runs. Decided once and remembered, so that a later change of the
 * folders' permissions does not lose a database.
 *
 * @returns {Promise<{ folder: string, user: { uid?: number, gid?: number } }>}
 */
export async function clusterPlace(name) {
  makeDataDir()
  const kept = readKept(`postgres-${name}.json`, null)
  const inClone = join(dataDir, `postgres-${name}`)
  const outside = join('/var/lib/emberstave', cloneHash, name)
  // A clone that was moved or copied takes the cluster that went with it, never the other clone's.
  const known = kept?.root === root ? kept.folder : null
  const folder = known ?? ((await reaches(await clusterUser(inClone), dataDir)) ? inClone : outside)
  const user = await clusterUser(folder)
  const owner = statSync(folder, { throwIfNoEntry: false })
  if (owner && !isRoot && owner.uid !== process.getuid()) {
    throw new SetupError(
      `The database in ${folder} belongs to another user of this machine.`,
      `Run the command as the user who ran it first, or remove .data to begin anew.`,
    )
  }
  const parent = dirname(folder)
  mkdirSync(parent, { recursive: true })
  if (parent !== dataDir) for (const one of [dirname(parent), parent]) chmodSync(one, 0o711)
  keep(`postgres-${name}.json`, { root, folder })
  return { folder, user }
}

/** An empty folder that PostgreSQL's user owns. */
export function emptyFolder(folder, user) {
  rmSync(folder, { recursive: true, force: true })
  mkdirSync(folder, { mode: 0o700 })
  if (user.uid !== undefined) chownSync(folder, user.uid, user.gid)
}

/** The version that made the cluster, or null when there is none. */
export function clusterMajor(folder) {
  try {
    return Number(readFileSync(join(folder, 'PG_VERSION'), 'utf8'))
  } catch (error) {
    if (error.code === 'ENOENT') return null
    throw error
  }
}

/**
 * The server that runs on this folder, or null. A `postmaster.pid` that a crash or a copy left behind, whose
 * process is gone or is another program by now, is removed: PostgreSQL itself would refuse to start over it.
 *
 * @returns {{ pid: number, port: number } | null}
 */
export function runningServer(folder) {
  const path = join(folder, 'postmaster.pid')
  let lines
  try {
    lines = readFileSync(path, 'utf8').split('\n')
  } catch (error) {
    if (error.code === 'ENOENT') return null
    throw error
  }
  const pid = Math.abs(Number(lines[0]))
  if (pid && workingFolder(pid) === realpathSync(folder)) return { pid, port: Number(lines[3]) }
  rmSync(path, { force: true })
  return null
}

/** A PostgreSQL server's working folder is its cluster; null for a process that is gone or not ours. */
function workingFolder(pid) {
  try {
    return readlinkSync(`/proc/${pid}/cwd`)
  } catch {
    return null
  }
}
