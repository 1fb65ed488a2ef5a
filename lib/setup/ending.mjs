const SIGNALS = ['SIGINT', 'SIGTERM', 'SIGHUP']

// What has to be done when the command is told to end, last made first.
const duties = []
let ending = false
let exitCode = 130

/**
 * Has `duty` done before this process ends by a signal (Ctrl-C, a service manager, a closed terminal). While there
 * is none, signals keep their usual meaning.
 *
 * @param {() => unknown} duty may answer a promise
 * @returns {() => void} takes it back
 */
export function whenEnding(duty) {
  if (duties.length === 0) for (const signal of SIGNALS) process.on(signal, end)
  duties.push(duty)
  return () => {
    const at = duties.indexOf(duty)
    if (at >= 0) duties.splice(at, 1)
    if (duties.length === 0 && !ending) for (const signal of SIGNALS) process.off(signal, end)
  }
}

/** For a command that is meant to be ended by a signal: doing so is a success from now on. */
export function endingIsSuccess() {
  exitCode = 0
}

export function isEnding() {
  return ending
}

async function end() {
  // The second signal means now.
  if (ending) process.exit(130)
  ending = true
  for (const duty of [...duties].reverse()) {
    try {
      await duty()
    } catch {
      // Each of the others still gets its turn.
    }
  }
  process.exit(exitCode)
}
