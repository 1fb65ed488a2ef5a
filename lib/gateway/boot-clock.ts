/**
 * The clock of one run of the gateway program. The box's own clock may be wrong at the start and be set while the
 * program runs; a run's instants must not jump for that. So instants of readings are counted by the clock that never
 * steps, from the wall clock's time at the start (`countedMs`), and what the wall clock has been set by since then is
 * kept apart (`shiftMs`). Their sum (`nowMs`) is the wall clock without the noise of reading it.
 */
export type BootClock = {
  /** This run's own count at an instant of the steady clock, ms since 1970. It never steps. */
  countedMs: (steadyMs: number) => number
  /** Best known time, ms since 1970: the count with what the wall clock was set by. */
  nowMs: () => number
  /** Looks at the wall clock: by how much it was set since the last look, ms; null when it was not. */
  look: () => number | null
  /** All that the wall clock was set by during this run, ms. */
  shiftMs: () => number
}

type ClockSources = { wallMs?: () => number; steadyMs?: () => number }

/** Below this the two clocks are taken to agree; slewing and scheduling stay far under it. */
const STEP_MS = 250

export function createBootClock(sources: ClockSources = {}): BootClock {
  const { wallMs = Date.now, steadyMs = () => performance.now() } = sources
  const offsetMs = wallMs() - steadyMs()
  let shiftMs = 0
  return {
    countedMs: (atMs) => atMs + offsetMs,
    nowMs: () => steadyMs() + offsetMs + shiftMs,
    look: () => {
      const before = steadyMs()
      const wall = wallMs()
      // When the process was held up between the two, the comparison says nothing.
      if (steadyMs() - before > STEP_MS / 5) return null
      const stepMs = wall - (before + offsetMs + shiftMs)
      if (Math.abs(stepMs) < STEP_MS) return null
      shiftMs += stepMs
      return stepMs
    },
    shiftMs: () => shiftMs,
  }
}
