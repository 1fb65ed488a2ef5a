import { execFile } from 'node:child_process'
import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { promisify } from 'node:util'
import type { Cluster } from '@/lib/setup/postgres.mjs'

const runFile = promisify(execFile)

/** kill -9 of a private cluster's postmaster and of every process that it started; settles when all are gone. */
export async function killPostgres({ folder }: Pick<Cluster, 'folder'>): Promise<void> {
  const postmaster = Number(readFileSync(join(folder, 'postmaster.pid'), 'utf8').split('\n')[0])
  // Each backend is the leader of a group of its own, so that the group of the postmaster is not enough.
  const all = [postmaster, ...childrenOf(postmaster)]
  for (const pid of all) kill(pid)
  for (const untilMs = Date.now() + 10_000; all.some(isAlive);) {
    if (Date.now() > untilMs) throw new Error('PostgreSQL did not end by kill -9 within 10 s')
    await sleep(5)
  }
}

/** Starts it again where it was; settles when it answers, after its recovery. */
export async function startPostgres({ folder, bin, user }: Cluster): Promise<void> {
  const args = ['-D', folder, '-l', join(folder, 'server.log'), '-w', '-t', '60', 'start']
  // The killed one may stay in the table of processes for a moment, and its lock file with it.
  for (const untilMs = Date.now() + 60_000; ;) {
    try {
      // The log is the only output: a pipe would be inherited by the server and never close.
      await runFile('/bin/sh', ['-c', 'exec "$0" "$@" > /dev/null 2>&1', join(bin, 'pg_ctl'), ...args], {
        cwd: '/',
        ...user,
      })
      return
    } catch (error) {
      if (Date.now() > untilMs) throw error
      await sleep(500)
    }
  }
}

function childrenOf(parent: number): number[] {
  return readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name))
    .map(Number)
    .filter((pid) => parentOf(pid) === parent)
}

/** Null for a process that is gone. */
function parentOf(pid: number): number | null {
  const fields = statOf(pid)
  return fields === null ? null : Number(fields[1])
}

function isAlive(pid: number): boolean {
  const fields = statOf(pid)
  return fields !== null && fields[0] !== 'Z'
}

/** State, parent and so on of a process: what follows its name, which may hold spaces and brackets. */
function statOf(pid: number): string[] | null {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8')
    return stat.slice(stat.lastIndexOf(')') + 2).split(' ')
  } catch {
    return null
  }
}

function kill(pid: number): void {
  try {
    process.kill(pid, 'SIGKILL')
  } catch (error) {
    const isGone = error instanceof Error && 'code' in error && error.code === 'ESRCH'
    if (!isGone) throw error
  }
}
