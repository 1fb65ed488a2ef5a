/**
 * Waiting time before try number `attempt` (0 is the first repeat), ms: doubles from `baseMs` up to `capMs`, and half
 * of it is left to chance so that many gateways do not come back at one instant. `random` gives [0, 1).
 */
export function backoffMs(attempt: number, random: () => number, baseMs = 500, capMs = 2_000): number {
  const wholeMs = Math.min(capMs, baseMs * 2 ** Math.min(attempt, 30))
  return wholeMs * (0.5 + 0.5 * random())
}
