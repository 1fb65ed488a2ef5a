import { requireEqualLength, requireFinite, requireNotNegative, requirePositive } from './domain'

/** When a probe counts as settled at a reference: both hold over the last `windowS`. */
export type SettlingRule = {
  windowS: number
  /** Largest sample standard deviation of the readings, °C. */
  sdMaxC: number
  /** Largest size of the least-squares slope, °C/min. */
  slopeMaxCPerMin: number
}

/** Why a probe is not settled yet; 'settled' when it is. */
export type SettlingState = 'settled' | 'stale' | 'no reading' | 'too few' | 'scattered' | 'drifting'

export type Settling = {
  state: SettlingState
  /** Of the window; null while there are fewer than two readings in it. */
  meanC: number | null
  sdC: number | null
  slopeCPerMin: number | null
  count: number
  /** From the first reading of the window to the last, s. */
  spanS: number
}

/** A newest reading older than this is not of now, s. */
export const staleAfterS = 3
/** Fewer readings than this in the window say nothing about scatter. */
export const leastReadings = 10
/** The readings must fill this share of the window, and no silence in it be longer than a sixth of it. */
const leastShare = 0.9
const longestSilenceShare = 1 / 6

/**
 * Whether a probe has settled (SCIENCE §1, checks): over the window that ends at the newest reading, the sample
 * standard deviation s = √(Σ(T − T̄)²/(n − 1)) and the size of the least-squares slope
 * b = Σ(t − t̄)(T − T̄)/Σ(t − t̄)² are at most what the rule says. The scatter is tested before the drift, since a
 * drift alone makes scatter too. Temperatures are as the probe gives them; a NaN is no reading and unsettles.
 *
 * @param timeS rising, s
 * @param tempC °C, as long as `timeS`
 * @param nowS the present on the same clock, s
 * @throws RangeError for arrays of different length, a rule that is not positive, or times that are not finite
 */
export function settlingOf(
  timeS: readonly number[],
  tempC: readonly number[],
  nowS: number,
  rule: SettlingRule,
): Settling {
  requireEqualLength('timeS', timeS, 'tempC', tempC)
  requireFinite('nowS', nowS)
  requirePositive('windowS', rule.windowS)
  requireNotNegative('sdMaxC', rule.sdMaxC)
  requireNotNegative('slopeMaxCPerMin', rule.slopeMaxCPerMin)
  const lastS = timeS.at(-1)
  if (lastS === undefined) return unsettled('too few', [], [])
  const from = timeS.findIndex((at) => at > lastS - rule.windowS)
  const times = timeS.slice(from).map((at) => requireFinite('timeS', at))
  const temps = tempC.slice(from)
  if (nowS - lastS > staleAfterS) return unsettled('stale', times, temps)
  if (temps.some(Number.isNaN)) return unsettled('no reading', times, temps)
  if (!fillsWindow(times, rule.windowS)) return unsettled('too few', times, temps)
  const window = unsettled('settled', times, temps)
  if ((window.sdC ?? Infinity) > rule.sdMaxC) return { ...window, state: 'scattered' }
  if (Math.abs(window.slopeCPerMin ?? Infinity) > rule.slopeMaxCPerMin)
    return { ...window, state: 'drifting' }
  return window
}

function fillsWindow(times: readonly number[], windowS: number): boolean {
  const spanS = (times.at(-1) ?? 0) - (times[0] ?? 0)
  const hasSilence = times.some((at, i) => i > 0 && at - (times[i - 1] ?? at) > windowS * longestSilenceShare)
  return times.length >= leastReadings && spanS >= leastShare * windowS && !hasSilence
}

/** The window's figures under a state, in two passes; what has no reading is left out. No package: it runs in browsers. */
function unsettled(state: SettlingState, times: readonly number[], temps: readonly number[]): Settling {
  const kept = times.map((at, i) => [at, temps[i] ?? NaN] as const).filter(([, temp]) => !Number.isNaN(temp))
  const count = kept.length
  const spanS = count === 0 ? 0 : (kept.at(-1)?.[0] ?? 0) - (kept[0]?.[0] ?? 0)
  if (count < 2) return { state, meanC: null, sdC: null, slopeCPerMin: null, count, spanS }
  const meanS = kept.reduce((sum, [at]) => sum + at, 0) / count
  const meanC = kept.reduce((sum, [, temp]) => sum + temp, 0) / count
  let squaresS = 0
  let squaresC = 0
  let products = 0
  for (const [at, temp] of kept) {
    squaresS += (at - meanS) ** 2
    squaresC += (temp - meanC) ** 2
    products += (at - meanS) * (temp - meanC)
  }
  return {
    state,
    meanC,
    sdC: Math.sqrt(squaresC / (count - 1)),
    slopeCPerMin: squaresS === 0 ? null : (60 * products) / squaresS,
    count,
    spanS,
  }
}
