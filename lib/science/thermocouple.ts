import { requireFinite, requireWithin } from './domain'

/** Thermocouple types that the product reads, by their letter in IEC 60584-1. */
export type ThermocoupleType = 'K' | 'N' | 'J' | 'T'

/** One piece of a reference function, up to and including `toTempC`: Σ cᵢ·tⁱ, mV, constant term first. */
type DirectPiece = {
  toTempC: number
  coefficients: readonly number[]
  /** Type K above 0 °C adds height·exp(perC2·(t − centre)²). */
  gaussian?: { heightMv: number; perC2: number; centreC: number }
}

/** One piece of a published approximate inverse, up to and including `toEmfMv`: Σ dᵢ·Eⁱ, °C. */
type InversePiece = { toEmfMv: number; coefficients: readonly number[] }

type ReferenceFunctions = {
  direct: readonly DirectPiece[]
  inverse: readonly InversePiece[]
  /** Full range of the reference function, °C. */
  tempC: { min: number; max: number }
  /** Where the published inverse begins, °C; it ends where the reference function ends. */
  inverseMinTempC: number
  /** Range of the inverse as published, mV to three decimals. */
  inverseEmfMv: { min: number; max: number }
}

/**
 * ITS-90 reference functions and approximate inverses, reference junction at 0 °C: NIST Monograph 175 (NIST SRD 60);
 * the same functions stand in IEC 60584-1 and ASTM E230.
 */
const REFERENCE: Readonly<Record<ThermocoupleType, ReferenceFunctions>> = {
  K: {
    direct: [
      {
        toTempC: 0,
        coefficients: [
          0.0, 0.039450128025, 2.3622373598e-5, -3.2858906784e-7, -4.9904828777e-9, -6.7509059173e-11,
          -5.7410327428e-13, -3.1088872894e-15, -1.0451609365e-17, -1.9889266878e-20, -1.6322697486e-23,
        ],
      },
      {
        toTempC: 1372,
        coefficients: [
          -0.017600413686, 0.038921204975, 1.8558770032e-5, -9.9457592874e-8, 3.1840945719e-10,
          -5.6072844889e-13, 5.6075059059e-16, -3.2020720003e-19, 9.7151147152e-23, -1.2104721275e-26,
        ],
        gaussian: { heightMv: 0.1185976, perC2: -0.1183432e-3, centreC: 126.9686 },
      },
    ],
    inverse: [
      // -200 to 0 °C, stated error -0.02..+0.04 °C
      {
        toEmfMv: 0.0,
        coefficients: [
          0.0, 25.173462, -1.1662878, -1.0833638, -0.8977354, -0.37342377, -0.086632643, -0.010450598,
          -0.00051920577,
        ],
      },
      // 0 to 500 °C, stated error -0.05..+0.04 °C
      {
        toEmfMv: 20.644,
        coefficients: [
          0.0, 25.08355, 0.07860106, -0.2503131, 0.0831527, -0.01228034, 0.0009804036, -4.41303e-5,
          1.057734e-6, -1.052755e-8,
        ],
      },
      // 500 to 1372 °C, stated error -0.05..+0.06 °C
      {
        toEmfMv: 54.886,
        coefficients: [-131.8058, 48.30222, -1.646031, 0.05464731, -0.0009650715, 8.802193e-6, -3.11081e-8],
      },
    ],
    tempC: { min: -270, max: 1372 },
    inverseMinTempC: -200,
    inverseEmfMv: { min: -5.891, max: 54.886 },
  },
  N: {
    direct: [
      {
        toTempC: 0,
        coefficients: [
          0.0, 0.026159105962, 1.0957484228e-5, -9.3841111554e-8, -4.6412039759e-11, -2.6303357716e-12,
          -2.2653438003e-14, -7.6089300791e-17, -9.3419667835e-20,
        ],
      },
      {
        toTempC: 1300,
        coefficients: [
          0.0, 0.025929394601, 1.571014188e-5, 4.3825627237e-8, -2.5261169794e-10, 6.4311819339e-13,
          -1.0063471519e-15, 9.9745338992e-19, -6.0863245607e-22, 2.0849229339e-25, -3.0682196151e-29,
        ],
      },
    ],
    inverse: [
      // -200 to 0 °C, stated error -0.02..+0.03 °C
      {
        toEmfMv: 0.0,
        coefficients: [
          0.0, 38.436847, 1.1010485, 5.2229312, 7.2060525, 5.8488586, 2.7754916, 0.77075166, 0.11582665,
          0.0073138868,
        ],
      },
      // 0 to 600 °C, stated error -0.02..+0.03 °C
      {
        toEmfMv: 20.613,
        coefficients: [0.0, 38.6896, -1.08267, 0.0470205, -2.12169e-6, -0.000117272, 5.3928e-6, -7.98156e-8],
      },
      // 600 to 1300 °C, stated error -0.04..+0.02 °C
      {
        toEmfMv: 47.513,
        coefficients: [19.72485, 33.00943, -0.3915159, 0.009855391, -0.0001274371, 7.767022e-7],
      },
    ],
    tempC: { min: -270, max: 1300 },
    inverseMinTempC: -200,
    inverseEmfMv: { min: -3.99, max: 47.513 },
  },
  J: {
    direct: [
      {
        toTempC: 760,
        coefficients: [
          0.0, 0.050381187815, 3.047583693e-5, -8.568106572e-8, 1.3228195295e-10, -1.7052958337e-13,
          2.0948090697e-16, -1.2538395336e-19, 1.5631725697e-23,
        ],
      },
      {
        toTempC: 1200,
        coefficients: [
          296.45625681, -1.4976127786, 0.0031787103924, -3.1847686701e-6, 1.5720819004e-9, -3.0691369073e-13,
        ],
      },
    ],
    inverse: [
      // -210 to 0 °C, stated error -0.05..+0.03 °C
      {
        toEmfMv: 0.0,
        coefficients: [
          0.0, 19.528268, -1.2286185, -1.0752178, -0.59086933, -0.17256713, -0.028131513, -0.002396337,
          -8.3823321e-5,
        ],
      },
      // 0 to 760 °C, stated error -0.04..+0.04 °C
      {
        toEmfMv: 42.919,
        coefficients: [
          0.0, 19.78425, -0.2001204, 0.01036969, -0.0002549687, 3.585153e-6, -5.344285e-8, 5.09989e-10,
        ],
      },
      // 760 to 1200 °C, stated error -0.04..+0.03 °C
      {
        toEmfMv: 69.553,
        coefficients: [-3113.58187, 300.543684, -9.9477323, 0.17027663, -0.00143033468, 4.73886084e-6],
      },
    ],
    tempC: { min: -210, max: 1200 },
    inverseMinTempC: -210,
    inverseEmfMv: { min: -8.095, max: 69.553 },
  },
  T: {
    direct: [
      {
        toTempC: 0,
        coefficients: [
          0.0, 0.038748106364, 4.4194434347e-5, 1.1844323105e-7, 2.0032973554e-8, 9.0138019559e-10,
          2.2651156593e-11, 3.6071154205e-13, 3.8493939883e-15, 2.8213521925e-17, 1.4251594779e-19,
          4.8768662286e-22, 1.079553927e-24, 1.3945027062e-27, 7.9795153927e-31,
        ],
      },
      {
        toTempC: 400,
        coefficients: [
          0.0, 0.038748106364, 3.329222788e-5, 2.0618243404e-7, -2.1882256846e-9, 1.0996880928e-11,
          -3.0815758772e-14, 4.547913529e-17, -2.7512901673e-20,
        ],
      },
    ],
    inverse: [
      // -200 to 0 °C, stated error -0.02..+0.04 °C
      {
        toEmfMv: 0.0,
        coefficients: [
          0.0, 25.949192, -0.21316967, 0.79018692, 0.42527777, 0.13304473, 0.020241446, 0.0012668171,
        ],
      },
      // 0 to 400 °C, stated error -0.03..+0.03 °C
      {
        toEmfMv: 20.872,
        coefficients: [0.0, 25.928, -0.7602961, 0.04637791, -0.002165394, 6.048144e-5, -7.293422e-7],
      },
    ],
    tempC: { min: -270, max: 400 },
    inverseMinTempC: -200,
    inverseEmfMv: { min: -5.603, max: 20.872 },
  },
}

/** Limits of error by IEC 60584-1 (2013): the greater of `fixedC` and `perC`·|t| within [minC, maxC]; figures from copies of the table. */
type Tolerance = { minC: number; maxC: number; fixedC: number; perC: number }

const BASE_METAL_CLASS_1 = { minC: -40, maxC: 1000, fixedC: 1.5, perC: 0.004 }
const BASE_METAL_CLASS_2 = { minC: -40, maxC: 1200, fixedC: 2.5, perC: 0.0075 }
const BASE_METAL_CLASS_3 = { minC: -200, maxC: 40, fixedC: 2.5, perC: 0.015 }

const TOLERANCE: Readonly<Record<ThermocoupleType, Readonly<Record<1 | 2 | 3, Tolerance | null>>>> = {
  K: { 1: BASE_METAL_CLASS_1, 2: BASE_METAL_CLASS_2, 3: BASE_METAL_CLASS_3 },
  N: { 1: BASE_METAL_CLASS_1, 2: BASE_METAL_CLASS_2, 3: BASE_METAL_CLASS_3 },
  J: { 1: { ...BASE_METAL_CLASS_1, maxC: 750 }, 2: { ...BASE_METAL_CLASS_2, maxC: 750 }, 3: null },
  T: {
    1: { minC: -40, maxC: 350, fixedC: 0.5, perC: 0.004 },
    2: { minC: -40, maxC: 350, fixedC: 1, perC: 0.0075 },
    3: { minC: -200, maxC: 40, fixedC: 1, perC: 0.015 },
  },
}

function polynomial(coefficients: readonly number[], x: number): number {
  let sum = 0
  for (let i = coefficients.length - 1; i >= 0; i -= 1) sum = sum * x + (coefficients[i] ?? 0)
  return sum
}

function polynomialSlope(coefficients: readonly number[], x: number): number {
  let sum = 0
  for (let i = coefficients.length - 1; i >= 1; i -= 1) sum = sum * x + i * (coefficients[i] ?? 0)
  return sum
}

function gaussianMv(piece: DirectPiece, tempC: number): number {
  if (piece.gaussian === undefined) return 0
  const offsetC = tempC - piece.gaussian.centreC
  return piece.gaussian.heightMv * Math.exp(piece.gaussian.perC2 * offsetC * offsetC)
}

function pieceMv(piece: DirectPiece, tempC: number): number {
  return polynomial(piece.coefficients, tempC) + gaussianMv(piece, tempC)
}

function pieceSlopeMvPerC(piece: DirectPiece, tempC: number): number {
  const slope = polynomialSlope(piece.coefficients, tempC)
  if (piece.gaussian === undefined) return slope
  return slope + gaussianMv(piece, tempC) * 2 * piece.gaussian.perC2 * (tempC - piece.gaussian.centreC)
}

function functionsOf(type: ThermocoupleType): ReferenceFunctions {
  const functions = REFERENCE[type]
  if (functions === undefined) throw new RangeError(`type must be K, N, J or T, not ${String(type)}`)
  return functions
}

function referenceMv(functions: ReferenceFunctions, tempC: number): number {
  const piece = functions.direct.find((candidate) => tempC <= candidate.toTempC)
  if (piece === undefined) throw new RangeError(`tempC of ${tempC} is beyond the reference function`)
  return pieceMv(piece, tempC)
}

/**
 * Electromotive force of a thermocouple, mV, reference junction at 0 °C, by the ITS-90 reference function (NIST
 * Monograph 175, IEC 60584-1). Domain, °C: K −270…1372, N −270…1300, J −210…1200, T −270…400.
 *
 * @throws RangeError when the temperature is not a number of the type's range
 */
export function emfMv(type: ThermocoupleType, tempC: number): number {
  const functions = functionsOf(type)
  requireWithin('tempC', tempC, functions.tempC.min, functions.tempC.max)
  return referenceMv(functions, tempC)
}

type InverseRange = { minMv: number; maxMv: number; minTempC: number; maxTempC: number }

/**
 * The published range is rounded to 1 µV, so the exact emf at its ends is let in as well, with 1e-9 mV for the rounding
 * of sums that meet it (2e-8 °C).
 */
const RANGE_ROUNDING_MV = 1e-9
const inverseRanges = new Map<ThermocoupleType, InverseRange>()

function inverseRangeOf(type: ThermocoupleType): InverseRange {
  const known = inverseRanges.get(type)
  if (known !== undefined) return known
  const functions = functionsOf(type)
  const range = {
    minMv:
      Math.min(functions.inverseEmfMv.min, referenceMv(functions, functions.inverseMinTempC)) -
      RANGE_ROUNDING_MV,
    maxMv:
      Math.max(functions.inverseEmfMv.max, referenceMv(functions, functions.tempC.max)) + RANGE_ROUNDING_MV,
    minTempC: functions.inverseMinTempC,
    maxTempC: functions.tempC.max,
  }
  inverseRanges.set(type, range)
  return range
}

/**
 * Temperature by the published approximate inverse polynomial, °C: good to 0.06 °C, and where `tempCFromEmf` starts.
 * NIST Monograph 175 (SRD 60). Domain, mV: K −5.891…54.886, N −3.990…47.513, J −8.095…69.553, T −5.603…20.872.
 *
 * @throws RangeError when the emf is not a number of the inverse's range
 */
export function approximateTempCFromEmf(type: ThermocoupleType, emf: number): number {
  const range = inverseRangeOf(type)
  requireWithin('emfMv', emf, range.minMv, range.maxMv)
  const pieces = functionsOf(type).inverse
  const piece = pieces.find((candidate) => emf <= candidate.toEmfMv) ?? pieces.at(-1)
  return polynomial(piece?.coefficients ?? [], emf)
}

/** More steps than Newton's method needs from a start that is 0.06 °C off: it doubles its digits each time. */
const MOST_NEWTON_STEPS = 12
const NEWTON_TOLERANCE_C = 1e-10

/**
 * Temperature of a thermocouple, °C, from its emf with the reference junction at 0 °C: the root of the ITS-90
 * reference function, by Newton's method from the published inverse, to better than 1e-6 °C. Domain as
 * `approximateTempCFromEmf`; the ends, which are published to 1 µV, give the end temperature.
 *
 * @throws RangeError outside the inverse's range; the caller makes that no reading
 */
export function tempCFromEmf(type: ThermocoupleType, emf: number): number {
  let tempC = approximateTempCFromEmf(type, emf)
  const range = inverseRangeOf(type)
  const pieces = functionsOf(type).direct
  const piece = pieces.find((candidate) => emf <= pieceMv(candidate, candidate.toTempC)) ?? pieces.at(-1)
  if (piece === undefined) return tempC
  for (let step = 0; step < MOST_NEWTON_STEPS; step += 1) {
    const correctionC = (pieceMv(piece, tempC) - emf) / pieceSlopeMvPerC(piece, tempC)
    tempC -= correctionC
    if (Math.abs(correctionC) < NEWTON_TOLERANCE_C) break
  }
  return Math.min(Math.max(tempC, range.minTempC), range.maxTempC)
}

/**
 * Temperature of the measuring junction, °C, from the measured emf and the cold junction's temperature: the emf are
 * added, E = E_measured + E_type(cold junction), never the temperatures (law of intermediate temperatures; NIST SRD 60
 * introduction, IEC 60584-1).
 *
 * @throws RangeError when a value is not finite, or the cold junction or the sum is out of the type's range
 */
export function compensatedTempC(type: ThermocoupleType, measuredMv: number, coldJunctionC: number): number {
  const functions = functionsOf(type)
  requireFinite('measuredMv', measuredMv)
  requireWithin('coldJunctionC', coldJunctionC, functions.tempC.min, functions.tempC.max)
  const range = inverseRangeOf(type)
  const totalMv = measuredMv + referenceMv(functions, coldJunctionC)
  if (!(totalMv >= range.minMv && totalMv <= range.maxMv)) {
    throw new RangeError(
      `measuredMv of ${measuredMv} with coldJunctionC ${coldJunctionC} is beyond type ${type}: the sum is ${totalMv} mV`,
    )
  }
  return tempCFromEmf(type, totalMv)
}

/**
 * Limit of error of a new thermocouple by its IEC 60584-1 class, ±°C: the greater of a fixed value and a share of |t|;
 * null outside the class's range (type J has no class 3).
 *
 * @throws RangeError for a temperature that is not finite or a class that does not exist
 */
export function toleranceC(type: ThermocoupleType, iecClass: 1 | 2 | 3, tempC: number): number | null {
  functionsOf(type)
  requireFinite('tempC', tempC)
  const tolerance = TOLERANCE[type][iecClass]
  if (tolerance === undefined) throw new RangeError(`iecClass must be 1, 2 or 3, not ${String(iecClass)}`)
  if (tolerance === null || tempC < tolerance.minC || tempC > tolerance.maxC) return null
  return Math.max(tolerance.fixedC, tolerance.perC * Math.abs(tempC))
}
