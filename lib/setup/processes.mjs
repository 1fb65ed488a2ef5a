import { spawn } from 'node:child_process'
import { readFileSync } from 'node:fs'
import { createInterface } from 'node:readline'
import { setTimeout as sleep } from 'node:timers/promises'
import { whenEnding } from './ending.mjs'
import { keep, readKept } from './kept.mjs'
import { root } from './paths.mjs'
import { say, SetupError } from './say.mjs'

const RECORD = 'processes.json'
const GRACE_MS = 5000

/** TypeScript is run by Node with tsx in it: one process, which gets our signals itself. */
export const typescript = (file, ...args) => ['--import', 'tsx', file, ...args]

/**
 * The programs of one command. Their output comes prefixed by their name; when one of them ends by itself the others
 * are stopped too, and a signal to this process stops them all.
 */
export function createProcesses() {
  const running = new Map()
  let firstEnded = null
  let reportEnd
  const firstEnd = new Promise((resolve) => (reportEnd = resolve))
  whenEnding(stopAll)

  /** Starts a TypeScript program of the clone. */
  function start(name, file, env) {
    // A group of its own: Ctrl-C in the terminal reaches us alone, and we pass on one signal, not two.
    const child = spawn(process.execPath, typescript(file), {
      cwd: root,
      env,
      detached: true,
      stdio: ['ignore', 'pipe', 'pipe'],
    })
    running.set(name, child)
    for (const stream of [child.stdout, child.stderr]) {
      createInterface({ input: stream }).on('line', (line) =>
        process.stdout.write(`${name.padEnd(6)} | ${line}\n`),
      )
    }
    const onEnd = (code, signal) => {
      running.delete(name)
      remember()
      firstEnded ??= `${name} ended by itself (${signal ? `signal ${signal}` : `exit status ${code}`}).`
      reportEnd()
    }
    child.on('error', () => onEnd(127, null))
    child.on('exit', onEnd)
    remember()
  }

  function remember() {
    const list = [...running].map(([name, { pid }]) => ({ name, pid, startedAt: startOf(pid) }))
    keep(
      RECORD,
      list.filter((one) => one.pid !== undefined && one.startedAt !== null),
    )
  }

  async function stopAll() {
    const children = [...running.values()]
    const gone = Promise.all(children.map((child) => new Promise((resolve) => child.on('exit', resolve))))
    for (const child of children) signalGroup(child.pid, 'SIGTERM')
    if (children.length === 0 || (await Promise.race([gone.then(() => true), sleep(GRACE_MS, false)]))) return
    for (const [name, child] of running) {
      say(`${name} did not stop within 5 s: ending it`)
      signalGroup(child.pid, 'SIGKILL')
    }
    await Promise.race([gone, sleep(1000)])
  }

  function throwIfOneEnded() {
    if (firstEnded) throw new SetupError(firstEnded, 'Its last lines are above; everything else was stopped.')
  }

  /** Waits; throws as soon as one of the programs has ended by itself. */
  async function untilOneEnds() {
    await firstEnd
    throwIfOneEnded()
  }

  return { start, stopAll, throwIfOneEnded, untilOneEnds }
}

/**
 * Ends what an earlier run of this clone left behind when it was itself killed outright. Only processes that this
 * clone recorded, told from a later one with the same number by the time of their start.
 */
export async function endLeftovers() {
  const left = readKept(RECORD, []).filter((one) => startOf(one.pid) === one.startedAt)
  if (left.length === 0) return
  say(`ending what an earlier run left running: ${left.map((one) => one.name).join(', ')}`)
  for (const one of left) signalGroup(one.pid, 'SIGTERM')
  for (let waitedMs = 0; waitedMs < GRACE_MS; waitedMs += 100) {
    if (left.every((one) => startOf(one.pid) !== one.startedAt)) return
    await sleep(100)
  }
  for (const one of left) if (startOf(one.pid) === one.startedAt) signalGroup(one.pid, 'SIGKILL')
  await sleep(200)
}

function signalGroup(pid, signal) {
  try {
    process.kill(-pid, signal)
  } catch (error) {
    if (error.code !== 'ESRCH') throw error
  }
}

/** Which boot of the machine a process belongs to, and its start in ticks since (field 22 of its stat); null when gone. */
function startOf(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8')
    // The name in brackets may hold spaces and brackets of its own; a zombie has ended already.
    const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ')
    return fields[0] === 'Z'
      ? null
      : `${readFileSync('/proc/sys/kernel/random/boot_id', 'utf8').trim()} ${fields[19]}`
  } catch {
    return null
  }
}
