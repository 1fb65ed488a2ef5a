import { spawn } from 'node:child_process'
import type { ChildProcess } from 'node:child_process'
import { fileURLToPath } from 'node:url'

const root = fileURLToPath(new URL('../../', import.meta.url))
const lastLetters = 8_000
const alive = new Set<ChildProcess>()

/** A program of the clone as a child process that the suite may kill. */
export type Child = {
  readonly pid: number
  /** kill -9; settles when the process is gone. */
  kill: () => Promise<void>
  send: (message: object) => void
  /** What it printed last, once it has ended by itself; null while it runs and after `kill`. */
  fellOver: () => string | null
  output: () => string
}

export function startChild(file: string, args: readonly string[], env: Record<string, string>): Child {
  const child = spawn(process.execPath, ['--import', 'tsx', file, ...args], {
    cwd: root,
    env: { PATH: process.env['PATH'], NODE_ENV: 'production', ...env },
    stdio: ['ignore', 'pipe', 'pipe', 'ipc'],
  })
  alive.add(child)
  let output = ''
  let isKilled = false
  let hasEnded = false
  for (const stream of [child.stdout, child.stderr])
    stream?.on('data', (part: Buffer) => (output = (output + part.toString()).slice(-lastLetters)))
  const gone = new Promise<void>((resolve) => {
    const end = () => {
      hasEnded = true
      alive.delete(child)
      resolve()
    }
    child.on('exit', end)
    child.on('error', (error) => {
      output += error.message
      end()
    })
  })
  return {
    pid: child.pid ?? 0,
    kill: async () => {
      isKilled = true
      child.kill('SIGKILL')
      await gone
    },
    // A child that has just been killed hears nothing, which is what a killed child does.
    send: (message) => void (child.connected && child.send(message, () => {})),
    fellOver: () => (hasEnded && !isKilled ? output : null),
    output: () => output,
  }
}

/** For an end by a signal: nothing that was started here lives on. */
export function killChildren(): void {
  for (const child of alive) child.kill('SIGKILL')
}
