import { isEnding } from './ending.mjs'

/** A failure that a person can mend: one clear sentence, and what to do about it. */
export class SetupError extends Error {
  constructor(sentence, fix = '') {
    super(sentence)
    this.name = 'SetupError'
    this.fix = fix
  }
}

let steps = process.stdout

/** For commands whose standard output is read by a program: the steps go to standard error. */
export function sayToStandardError() {
  steps = process.stderr
}

/** One line for each step. */
export function say(line) {
  steps.write(`emberstave: ${line}\n`)
}

/** Says what went wrong; a fault of our own shows its stack, a known one its fix. */
export function sayFailure(error) {
  if (error instanceof SetupError) {
    process.stderr.write(`emberstave: ${error.message}\n`)
    if (error.fix) process.stderr.write(`${error.fix.replace(/^/gm, '  ')}\n`)
    return
  }
  if (error?.code === 'EACCES' || error?.code === 'EPERM') {
    process.stderr.write(
      `emberstave: ${error.path ?? 'A file of this clone'} belongs to another user.\n` +
        `  Run the command as the user who ran it first, or give yourself the clone: chown -R "$(id -un)" .\n`,
    )
    return
  }
  if (error?.code === 'ENOSPC') {
    process.stderr.write(`emberstave: the disk is full.\n  Free some space and run the command again.\n`)
    return
  }
  process.stderr.write(`emberstave: ${error?.stack ?? error}\n`)
}

/** Runs a command's main function and turns a failure into its sentence and exit status 1. */
export async function main(body) {
  // Whoever reads our output may stop reading (a pipe to head); the work goes on.
  process.stdout.on('error', () => {})
  try {
    process.exitCode = (await body()) ?? process.exitCode ?? 0
  } catch (error) {
    // What fails because it was told to end is no news; the process is about to exit.
    if (isEnding()) return
    sayFailure(error)
    process.exitCode = 1
  }
}
