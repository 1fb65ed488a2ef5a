import { spawn } from 'node:child_process'
import { setTimeout as sleep } from 'node:timers/promises'
import { whenEnding } from './ending.mjs'
import { root } from './paths.mjs'

/**
 * Runs a program to its end. Never throws for a program that fails or is missing: `code` is its exit
 * status (127 when it is not there), with what it printed. It is ended when this process is told to end.
 *
 * @param {string} file
 * @param {string[]} args
 * @param {{ cwd?: string, env?: NodeJS.ProcessEnv, uid?: number, gid?: number, input?: string, show?: boolean }} [options]
 *   `show` passes output straight through; otherwise it is collected.
 * @returns {Promise<{ code: number, stdout: string, stderr: string }>}
 */
export function run(file, args, options = {}) {
  const { cwd = root, env = process.env, uid, gid, input = '', show = false } = options
  return new Promise((resolve) => {
    const output = show ? 'inherit' : 'pipe'
    const child = spawn(file, args, { cwd, env, uid, gid, stdio: ['pipe', output, output] })
    const closed = new Promise((done) => child.on('close', done))
    const forget = whenEnding(() => endChild(child, closed))
    const collected = { stdout: '', stderr: '' }
    for (const name of ['stdout', 'stderr']) {
      child[name]?.setEncoding('utf8').on('data', (text) => (collected[name] += text))
    }
    const finish = (code, more = '') => {
      forget()
      resolve({ code, stdout: collected.stdout, stderr: collected.stderr + more })
    }
    child.on('error', (error) => finish(127, error.message))
    child.on('close', (code, signal) => finish(code ?? 1, signal ? `ended by ${signal}` : ''))
    // A program that exits without reading its input closes the pipe under us; its status tells the story.
    child.stdin.on('error', () => {})
    child.stdin.end(input)
  })
}

async function endChild(child, closed) {
  child.kill('SIGTERM')
  if ((await Promise.race([closed.then(() => true), sleep(5000, false)])) === true) return
  child.kill('SIGKILL')
}

/** The last lines of a program's output, for an error message. */
export function tail(text, lines = 12) {
  return text.trimEnd().split('\n').slice(-lines).join('\n')
}
