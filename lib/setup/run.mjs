import { spawn } from 'node:child_process'
import { root } from './paths.mjs'

/**
 * Runs a program to its end. Never throws for a program that fails or is missing: `code` is its exit
 * status (127 when it is not there), with what it printed.
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
    let stdout = ''
    let stderr = ''
    child.stdout?.setEncoding('utf8').on('data', (text) => (stdout += text))
    child.stderr?.setEncoding('utf8').on('data', (text) => (stderr += text))
    child.on('error', (error) => resolve({ code: 127, stdout, stderr: stderr + error.message }))
    child.on('close', (code, signal) =>
      resolve({ code: code ?? 1, stdout, stderr: signal ? `${stderr}${signal}` : stderr }),
    )
    // A program that exits without reading its input closes the pipe under us; its status tells the story.
    child.stdin.on('error', () => {})
    child.stdin.end(input)
  })
}

/** The last lines of a program's output, for an error message. */
export function tail(text, lines = 12) {
  return text.trimEnd().split('\n').slice(-lines).join('\n')
}
