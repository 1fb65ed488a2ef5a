import { GAS_CONSTANT_J_PER_MOL_K, ZERO_CELSIUS_K } from './constants'
import { requireFinite, requirePositive } from './domain'

/**
 * The constants of a heat dose. `refTempC`: the temperature at which one minute counts one minute, °C. `zC`: the
 * rise that makes the rate ten times larger, °C, above 0. `baseTempC`: nothing counts below it, °C; left out means
 * that every temperature counts. The product's defaults are 200, 34 and 120, and the caller passes them.
 */
export type DoseModel = { refTempC: number; zC: number; baseTempC?: number }

/** One point of a temperature curve; the curve is straight between points. `timeS` never falls; two equal times are a step. */
export type CurvePoint = { timeS: number; tempC: number }

/** A running heat dose: see `createDoseAccumulator`. */
export type DoseAccumulator = {
  /** Adds the straight segment from the last point to this one and returns the dose so far, minutes. */
  add(timeS: number, tempC: number): number
  /** Ends the segment at the last point: what lies between it and the next point counts nothing (a gap). */
  break(): void
  /** Dose so far, minutes at the model's reference temperature. */
  readonly minutes: number
}

/** Constants of the severity factor: Overend and Chornet, Phil. Trans. R. Soc. A 321 (1987) 523. */
const SEVERITY_REF_TEMP_C = 100
const SEVERITY_OMEGA_C = 14.75

function requireModel(model: DoseModel): void {
  requireFinite('refTempC', model.refTempC)
  requirePositive('zC', model.zC)
  if (model.baseTempC !== undefined) requireFinite('baseTempC', model.baseTempC)
}

function requireFiniteRate(rate: number, tempC: number): number {
  if (rate === Infinity)
    throw new RangeError(`tempC of ${tempC} is too far above refTempC: the rate has no number`)
  return rate
}

/**
 * Rate of the heat dose, minutes at `refTempC` per minute: r = 10^((T − Tref)/z), computed as exp(ln 10·(T − Tref)/z);
 * 0 below a given base, 1/10 to the last digit but one a z below the reference.
 *
 * 1 at `refTempC`. The same form as the lethal rate of thermal processing (Stumbo 1973) and, with z = 14.75·ln 10
 * and Tref 100 °C, as the severity of Overend and Chornet (1987).
 *
 * @throws RangeError for a constant or temperature that is not finite, z not above 0, or a rate beyond any number
 */
export function doseRate(model: DoseModel, tempC: number): number {
  requireModel(model)
  requireFinite('tempC', tempC)
  return createSegmentDose(model).rateAt(tempC)
}

/**
 * Mean of an exponential rate over a straight segment: (r2 − r1)/x with x = ln(r2/r1), or r1 when x = 0.
 * Near x = 0 the difference cancels, so there √(r1·r2)·sinh(x/2)/(x/2) by its series (error below 1e-16 for
 * |x| < 0.1). Both forms are symmetric, so a curve played backwards has the same dose.
 */
function meanRate(rate1: number, rate2: number, logRatio: number): number {
  if (rate1 === rate2) return rate1
  if (Math.abs(logRatio) >= 0.1) return (rate2 - rate1) / logRatio
  const y2 = (logRatio * logRatio) / 4
  return Math.sqrt(rate1) * Math.sqrt(rate2) * (1 + (y2 / 6) * (1 + (y2 / 20) * (1 + y2 / 42)))
}

/** The dose of one straight segment at a time, for whoever walks a curve himself: see `createSegmentDose`. */
export type SegmentDose = {
  /** The rate at a temperature; as `doseRate`, without asking again whether the numbers are numbers. */
  rateAt(tempC: number): number
  /** Dose of a straight segment, minutes at the reference temperature, from its ends and their rates by `rateAt`. */
  minutes(durationS: number, fromC: number, fromRate: number, toC: number, toRate: number): number
}

/**
 * The one place where a segment's dose is computed: the accumulator, the stave model and the score all walk with it.
 * Δt·(r2 − r1)/ln(r2/r1) for the part of the segment at or above the base. Temperatures must be finite.
 *
 * `rateAt` throws RangeError for a rate beyond any number.
 *
 * @throws RangeError when a constant of `model` is not finite or z is not above 0
 */
export function createSegmentDose(model: DoseModel): SegmentDose {
  requireModel(model)
  const { refTempC } = model
  const logRatePerC = Math.LN10 / model.zC
  const baseTempC = model.baseTempC ?? -Infinity
  const rateAt = (tempC: number) =>
    tempC < baseTempC ? 0 : requireFiniteRate(Math.exp(logRatePerC * (tempC - refTempC)), tempC)
  const baseRate = model.baseTempC === undefined ? 0 : rateAt(model.baseTempC)
  return {
    rateAt,
    minutes(durationS, fromC, fromRate, toC, toRate) {
      const isFromBelow = fromC < baseTempC
      const isToBelow = toC < baseTempC
      if (isFromBelow && isToBelow) return 0
      const riseC = toC - fromC
      if (!isFromBelow && !isToBelow)
        return (durationS / 60) * meanRate(fromRate, toRate, logRatePerC * riseC)
      // The segment crosses the base: only the part on the warm side counts.
      const aboveC = Math.max(fromC, toC) - baseTempC
      const countedS = durationS * (aboveC / Math.abs(riseC))
      return (countedS / 60) * meanRate(baseRate, Math.max(fromRate, toRate), logRatePerC * aboveC)
    },
  }
}

/**
 * A dose that grows point by point, bit for bit equal to `equivalentMinutes` over the same points: for the live
 * hub, which must not integrate a whole firing again for each reading.
 *
 * `add` throws RangeError for a time or temperature that is not finite and for a time that falls, and then leaves the
 * dose as it was.
 *
 * @throws RangeError when a constant of `model` is not finite or z is not above 0
 */
export function createDoseAccumulator(model: DoseModel): DoseAccumulator {
  const segment = createSegmentDose(model)
  // Fields of an object, since a number that a closure changes is a new object each time.
  const run = { minutes: 0, timeS: -Infinity, tempC: 0, rate: 0, isOpen: false }
  return {
    add(timeS, tempC) {
      requireFinite('timeS', timeS)
      requireFinite('tempC', tempC)
      if (timeS < run.timeS) throw new RangeError(`timeS must not fall: ${timeS} after ${run.timeS}`)
      const rate = segment.rateAt(tempC)
      if (run.isOpen && timeS > run.timeS) {
        run.minutes += segment.minutes(timeS - run.timeS, run.tempC, run.rate, tempC, rate)
      }
      run.timeS = timeS
      run.tempC = tempC
      run.rate = rate
      run.isOpen = true
      return run.minutes
    },
    break() {
      run.isOpen = false
    },
    get minutes() {
      return run.minutes
    },
  }
}

/**
 * Heat dose of a curve, minutes at `refTempC`: E = ∫ 10^((T − Tref)/z) dt.
 *
 * Exact on straight segments: Δt·(r2 − r1)/ln(r2/r1), or Δt·r1 when r1 = r2; a segment that crosses the base is cut
 * there. One point is no time and gives 0.
 *
 * @throws RangeError for no points, a value that is not finite, a time that falls, or z not above 0
 */
export function equivalentMinutes(model: DoseModel, points: readonly CurvePoint[]): number {
  requirePoints(points)
  const segment = createSegmentDose(model)
  let minutes = 0
  let fromS = Infinity
  let fromC = 0
  let fromRate = 0
  for (const { timeS, tempC } of points) {
    const rate = segment.rateAt(tempC)
    if (timeS > fromS) minutes += segment.minutes(timeS - fromS, fromC, fromRate, tempC, rate)
    fromS = timeS
    fromC = tempC
    fromRate = rate
  }
  return minutes
}

/** Names are made only on failure: a firing has ten thousand points and must cost little. */
function requirePoints(points: readonly CurvePoint[]): void {
  if (points.length === 0) throw new RangeError('points must hold at least one point')
  let lastTimeS = -Infinity
  let i = 0
  for (const { timeS, tempC } of points) {
    if (!Number.isFinite(timeS)) requireFinite(`points[${i}].timeS`, timeS)
    if (!Number.isFinite(tempC)) requireFinite(`points[${i}].tempC`, tempC)
    if (timeS < lastTimeS)
      throw new RangeError(`points[${i}].timeS must not fall: ${timeS} after ${lastTimeS}`)
    lastTimeS = timeS
    i += 1
  }
}

/** Kelvin from °C; throws a `RangeError` that names `name` at or below absolute zero. */
function requireKelvin(name: string, tempC: number): number {
  const tempK = requireFinite(name, tempC) + ZERO_CELSIUS_K
  if (!(tempK > 0)) throw new RangeError(`${name} must lie above absolute zero, not ${tempC}`)
  return tempK
}

/**
 * Rate of a first-order reaction against its rate at `refTempC`: exp((Ea/R)(1/Tref − 1/T)), kelvin inside;
 * R = 8.314462618 J/(mol·K), T = t + 273.15. Arrhenius's law; 1 at `refTempC`.
 *
 * @throws RangeError when Ea is not above 0 J/mol, or a temperature is not finite or not above absolute zero
 */
export function arrheniusRate(eaJPerMol: number, refTempC: number, tempC: number): number {
  requirePositive('eaJPerMol', eaJPerMol)
  const refTempK = requireKelvin('refTempC', refTempC)
  const tempK = requireKelvin('tempC', tempC)
  return requireFiniteRate(rateAtKelvin(eaJPerMol / GAS_CONSTANT_J_PER_MOL_K, refTempK, tempK), tempC)
}

function rateAtKelvin(eaOverRK: number, refTempK: number, tempK: number): number {
  return Math.exp(eaOverRK * ((tempK - refTempK) / (refTempK * tempK)))
}

/** Below exp(−45) of the segment's highest rate nothing is left that a double could hold beside it. */
const NEGLIGIBLE_LOG_RATE = 45

/** Gauss–Legendre nodes and weights on (−1, 1) with five points (Abramowitz and Stegun, Table 25.4). */
const GAUSS_NODE_1 = 0.5384693101056831
const GAUSS_NODE_2 = 0.906179845938664
const GAUSS_WEIGHT_0 = 0.5688888888888889
const GAUSS_WEIGHT_1 = 0.47862867049936647
const GAUSS_WEIGHT_2 = 0.23692688505618908

/**
 * ∫ rate dT from `lowK` to `highK`, K. A piece over which ln(rate) moves by ≤ 0.5 and T by ≤ 10 % is exact to
 * double precision with five points; anything wider is halved.
 */
function integrateRateOverTemp(eaOverRK: number, refTempK: number, lowK: number, highK: number): number {
  const spanK = highK - lowK
  const middleK = lowK + spanK / 2
  if ((eaOverRK * spanK) / (lowK * highK) > 0.5 || spanK > 0.1 * lowK) {
    return (
      integrateRateOverTemp(eaOverRK, refTempK, lowK, middleK) +
      integrateRateOverTemp(eaOverRK, refTempK, middleK, highK)
    )
  }
  const halfK = spanK / 2
  const rateAt = (node: number) => rateAtKelvin(eaOverRK, refTempK, middleK + node * halfK)
  return (
    halfK *
    (GAUSS_WEIGHT_0 * rateAt(0) +
      GAUSS_WEIGHT_1 * (rateAt(-GAUSS_NODE_1) + rateAt(GAUSS_NODE_1)) +
      GAUSS_WEIGHT_2 * (rateAt(-GAUSS_NODE_2) + rateAt(GAUSS_NODE_2)))
  )
}

/** Mean Arrhenius rate over a straight segment between two temperatures in kelvin, by quadrature. */
function meanArrheniusRate(eaOverRK: number, refTempK: number, firstK: number, secondK: number): number {
  if (firstK === secondK) return rateAtKelvin(eaOverRK, refTempK, firstK)
  const lowK = Math.min(firstK, secondK)
  const highK = Math.max(firstK, secondK)
  const floorK = 1 / (1 / highK + NEGLIGIBLE_LOG_RATE / eaOverRK)
  return integrateRateOverTemp(eaOverRK, refTempK, Math.max(lowK, floorK), highK) / (highK - lowK)
}

/** Up to these the series below holds to 1e-10: some 0.7 °C between two readings of a toast. */
const SERIES_UP_TO_SLOPE = 0.1
const SERIES_UP_TO_BEND = 1e-4

/** An Arrhenius integral one straight segment at a time: see `createArrheniusSegment`. */
export type ArrheniusSegment = {
  /** The rate at a temperature; as `arrheniusRate`, without asking again whether the numbers are numbers. */
  rateAt(tempC: number): number
  /** Minutes at the reference temperature of a straight segment, from its ends and their rates by `rateAt`. */
  minutes(durationS: number, fromC: number, fromRate: number, toC: number, toRate: number): number
}

/**
 * The one place where an Arrhenius integral over a segment is computed. Temperatures must be finite.
 *
 * Over close readings ln(rate) is a parabola in T: with x = Ea·ΔT/(R·Tm²) and c = Ea·ΔT²/(R·Tm³) its mean rate is
 * √(r1·r2)·(1 + x²/24 + x⁴/1920 + c/6 + x²c/240 + 7c²/240), to 1e-10; a wider segment goes through the quadrature.
 *
 * `rateAt` throws RangeError at or below absolute zero, and for a rate beyond any number.
 *
 * @throws RangeError when Ea is not above 0 J/mol or the reference is not above absolute zero
 */
export function createArrheniusSegment(eaJPerMol: number, refTempC: number): ArrheniusSegment {
  const eaOverRK = requirePositive('eaJPerMol', eaJPerMol) / GAS_CONSTANT_J_PER_MOL_K
  const refTempK = requireKelvin('refTempC', refTempC)
  return {
    rateAt(tempC) {
      const tempK = tempC + ZERO_CELSIUS_K
      if (!(tempK > 0)) requireKelvin('tempC', tempC)
      return requireFiniteRate(rateAtKelvin(eaOverRK, refTempK, tempK), tempC)
    },
    minutes(durationS, fromC, fromRate, toC, toRate) {
      const riseC = toC - fromC
      const middleK = (fromC + toC) / 2 + ZERO_CELSIUS_K
      const x = (eaOverRK * riseC) / (middleK * middleK)
      const bend = x * (riseC / middleK)
      if (Math.abs(x) > SERIES_UP_TO_SLOPE || bend > SERIES_UP_TO_BEND) {
        const mean = meanArrheniusRate(eaOverRK, refTempK, fromC + ZERO_CELSIUS_K, toC + ZERO_CELSIUS_K)
        return (durationS / 60) * mean
      }
      const x2 = x * x
      const series = 1 + x2 / 24 + (x2 * x2) / 1920 + bend / 6 + (x2 * bend) / 240 + (7 * bend * bend) / 240
      return (durationS / 60) * Math.sqrt(fromRate) * Math.sqrt(toRate) * series
    },
  }
}

/**
 * ∫ exp((Ea/R)(1/Tref − 1/T)) dt over a curve, minutes at `refTempC`, each straight segment to 1e-10 or better
 * (`createArrheniusSegment`). The product's slow index is Ea 76.0, its fast index 151.7 kJ/mol: Prins, Ptasinski and
 * Janssen, J. Anal. Appl. Pyrolysis 77 (2006) 28, fitted at 230–300 °C, so extrapolated here.
 *
 * @throws RangeError for no points, a value that is not finite, a time that falls, Ea not above 0, or a temperature
 *   not above absolute zero
 */
export function arrheniusEquivalentMinutes(
  eaJPerMol: number,
  refTempC: number,
  points: readonly CurvePoint[],
): number {
  const segment = createArrheniusSegment(eaJPerMol, refTempC)
  requirePoints(points)
  let minutes = 0
  let fromS = Infinity
  let fromC = 0
  let fromRate = 0
  points.forEach(({ timeS, tempC }, i) => {
    if (!(tempC + ZERO_CELSIUS_K > 0)) requireKelvin(`points[${i}].tempC`, tempC)
    const rate = segment.rateAt(tempC)
    if (timeS > fromS) minutes += segment.minutes(timeS - fromS, fromC, fromRate, tempC, rate)
    fromS = timeS
    fromC = tempC
    fromRate = rate
  })
  if (minutes === Infinity) throw new RangeError('points are too far above refTempC: the dose has no number')
  return minutes
}

/**
 * log10 of the severity factor R0 = ∫ exp((T − 100)/14.75) dt, t in minutes, T in °C (Overend and Chornet, Phil.
 * Trans. R. Soc. A 321 (1987) 523). The heat dose with Tref 100 °C and z = 14.75·ln 10 = 33.963 °C, no base.
 *
 * @throws RangeError as `equivalentMinutes` does, and for points that span no time, which have no logarithm
 */
export function log10Severity(points: readonly CurvePoint[]): number {
  const severityMin = equivalentMinutes(
    { refTempC: SEVERITY_REF_TEMP_C, zC: SEVERITY_OMEGA_C * Math.LN10 },
    points,
  )
  if (severityMin === 0) throw new RangeError('points must span some time: no exposure has no logarithm')
  return Math.log10(severityMin)
}

/**
 * The z, °C, whose rate rises at `tempC` as Arrhenius's does: z = ln 10·R·T²/Ea. Ea 126 kJ/mol at 200 °C is z 34.
 *
 * @throws RangeError when Ea is not above 0 J/mol, or the temperature is not finite or not above absolute zero
 */
export function zCFromActivationEnergy(eaJPerMol: number, tempC: number): number {
  requirePositive('eaJPerMol', eaJPerMol)
  const tempK = requireKelvin('tempC', tempC)
  return (Math.LN10 * GAS_CONSTANT_J_PER_MOL_K * tempK * tempK) / eaJPerMol
}
