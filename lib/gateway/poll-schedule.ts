/** A clock that never steps, ms, and its alarm; tests turn it by hand. `wait` gives its own undoing. */
export type SteadyClock = {
  steadyMs: () => number
  wait: (durationMs: number, then: () => void) => () => void
}

export const systemSteadyClock: SteadyClock = {
  steadyMs: () => performance.now(),
  wait: (durationMs, then) => {
    const timer = setTimeout(then, durationMs)
    return () => clearTimeout(timer)
  },
}

/**
 * Calls `onDue` at start, start + interval, start + 2 intervals and so on, on a clock that never steps: being late
 * once makes nothing later. Turns that were missed altogether are left out and counted for the next call.
 * Gives its own undoing.
 */
export function startPolling(
  intervalMs: number,
  clock: SteadyClock,
  onDue: (missed: number) => void,
): () => void {
  const startMs = clock.steadyMs()
  let turn = 0
  let cancel = () => {}
  const waitForTurn = () => {
    cancel = clock.wait(Math.max(0, startMs + turn * intervalMs - clock.steadyMs()), take)
  }
  const take = () => {
    const turnNow = Math.floor((clock.steadyMs() - startMs) / intervalMs)
    // A timer may ring a little early: then wait for the rest.
    if (turnNow < turn) {
      waitForTurn()
      return
    }
    const missed = turnNow - turn
    turn = turnNow + 1
    waitForTurn()
    onDue(missed)
  }
  waitForTurn()
  return () => cancel()
}
