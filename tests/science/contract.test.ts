import { describe, expect, expectTypeOf, it } from 'vitest'
import { deltaE2000, labFromSrgb } from '../../lib/science/colour'
import type { Face } from '../../lib/science/conduction'
import { conductSlab } from '../../lib/science/conduction'
import {
  ewma,
  individualsMovingRange,
  nelsonRules,
  processCapability,
  tabularCusum,
} from '../../lib/science/control-chart'
import {
  curveDeviation,
  discreteFrechet,
  dynamicTimeWarping,
  pchip,
  savitzkyGolayWeights,
} from '../../lib/science/curve'
import { nioshLimitsC, timeWeighted8hPpm, wbgtIndoorC } from '../../lib/science/exposure'
import type { CurvePoint, DoseModel } from '../../lib/science/heat-dose'
import {
  arrheniusEquivalentMinutes,
  arrheniusRate,
  doseRate,
  equivalentMinutes,
  log10Severity,
  zCFromActivationEnergy,
} from '../../lib/science/heat-dose'
import { checkCharacter37_36, isValid37_36 } from '../../lib/science/identifier'
import type { Stage } from '../../lib/science/plan'
import { planCurve, solveStage } from '../../lib/science/plan'
import {
  chiSquareQuantile,
  fQuantile,
  lag1Autocorrelation,
  linearRegression,
  mean,
  nonlinearLeastSquares,
  oneWayAnova,
  sampleSd,
  tQuantile,
} from '../../lib/science/statistics'
import {
  boilingPointC,
  saturationPressureMpa,
  saturationTempK,
  standardPressurePa,
} from '../../lib/science/steam'
import type { ThermocoupleType } from '../../lib/science/thermocouple'
import { compensatedTempC, emfMv, tempCFromEmf, toleranceC } from '../../lib/science/thermocouple'
import {
  conductivityWPerMK,
  densityKgPerM3,
  equilibriumMoisturePercent,
  heatCapacityJPerKgK,
  moisturePercent,
} from '../../lib/science/wood'
import { expectWithin, notNumbers } from './published-checks'
import { hold } from './sample-curves'

const model: DoseModel = { refTempC: 200, zC: 34, baseTempC: 120 }
const slab = {
  thicknessM: 0.027,
  nodes: 5,
  conductivityWPerMK: 0.18,
  densityKgPerM3: 700,
  heatCapacityJPerKgK: 1700,
  initialTempC: 20,
  hot: { tempC: 200 },
  cold: { hWPerM2K: 10, ambientC: 20 },
  durationS: 60,
  stepS: 1,
} as const
const capability = { usl: 2, lsl: 1, mean: 1.5, sd: 0.1 }
const window = { window: 5, degree: 2, derivative: 0, spacing: 1 }
const line = (b: readonly number[], x: number) => (b[0] ?? 0) * x
const ramp = (targetTempC: number, durationS: number): Stage[] => [{ kind: 'ramp', targetTempC, durationS }]
const solving = {
  startTempC: 30,
  stages: ramp(200, 1800),
  stageIndex: 0,
  vary: 'minutes' as const,
  wantedDoseMin: 5,
  model,
  min: 1,
  max: 90,
}

/** Each numeric argument of the contract (SCIENCE, “Contract”): its name, and a call whose other arguments are good. */
const numericArguments: readonly [
  functionName: string,
  argument: string,
  call: (value: number) => unknown,
][] = [
  ['emfMv', 'tempC', (v) => emfMv('K', v)],
  ['tempCFromEmf', 'emfMv', (v) => tempCFromEmf('K', v)],
  ['compensatedTempC', 'measuredMv', (v) => compensatedTempC('N', v, 20)],
  ['compensatedTempC', 'coldJunctionC', (v) => compensatedTempC('N', 5, v)],
  ['toleranceC', 'tempC', (v) => toleranceC('J', 1, v)],
  ['saturationPressureMpa', 'tempK', (v) => saturationPressureMpa(v)],
  ['saturationTempK', 'pressureMpa', (v) => saturationTempK(v)],
  ['boilingPointC', 'pressureHpa', (v) => boilingPointC(v)],
  ['standardPressurePa', 'altitudeM', (v) => standardPressurePa(v)],
  ['doseRate', 'tempC', (v) => doseRate(model, v)],
  ['doseRate', 'refTempC', (v) => doseRate({ ...model, refTempC: v }, 200)],
  ['doseRate', 'zC', (v) => doseRate({ ...model, zC: v }, 200)],
  ['doseRate', 'baseTempC', (v) => doseRate({ ...model, baseTempC: v }, 200)],
  ['equivalentMinutes', 'tempC', (v) => equivalentMinutes(model, hold(1, v))],
  ['equivalentMinutes', 'timeS', (v) => equivalentMinutes(model, hold(v, 200))],
  ['equivalentMinutes', 'zC', (v) => equivalentMinutes({ ...model, zC: v }, hold(1, 200))],
  ['arrheniusRate', 'eaJPerMol', (v) => arrheniusRate(v, 200, 180)],
  ['arrheniusRate', 'refTempC', (v) => arrheniusRate(126_000, v, 180)],
  ['arrheniusRate', 'tempC', (v) => arrheniusRate(126_000, 200, v)],
  ['arrheniusEquivalentMinutes', 'eaJPerMol', (v) => arrheniusEquivalentMinutes(v, 200, hold(1, 180))],
  ['arrheniusEquivalentMinutes', 'refTempC', (v) => arrheniusEquivalentMinutes(126_000, v, hold(1, 180))],
  ['arrheniusEquivalentMinutes', 'tempC', (v) => arrheniusEquivalentMinutes(126_000, 200, hold(1, v))],
  ['log10Severity', 'tempC', (v) => log10Severity(hold(1, v))],
  ['zCFromActivationEnergy', 'eaJPerMol', (v) => zCFromActivationEnergy(v, 200)],
  ['zCFromActivationEnergy', 'tempC', (v) => zCFromActivationEnergy(126_000, v)],
  ['equilibriumMoisturePercent', 'tempC', (v) => equilibriumMoisturePercent(v, 50)],
  ['equilibriumMoisturePercent', 'relativeHumidityPercent', (v) => equilibriumMoisturePercent(20, v)],
  ['heatCapacityJPerKgK', 'tempK', (v) => heatCapacityJPerKgK(v, 10)],
  ['heatCapacityJPerKgK', 'moisturePercent', (v) => heatCapacityJPerKgK(300, v)],
  ['conductivityWPerMK', 'specificGravity', (v) => conductivityWPerMK(v, 10)],
  ['conductivityWPerMK', 'moisturePercent', (v) => conductivityWPerMK(0.65, v)],
  ['moisturePercent', 'wetMassG', (v) => moisturePercent(v, 50)],
  ['moisturePercent', 'ovenDryMassG', (v) => moisturePercent(60, v)],
  ['densityKgPerM3', 'specificGravity', (v) => densityKgPerM3(v, 10)],
  ['densityKgPerM3', 'moisturePercent', (v) => densityKgPerM3(0.65, v)],
  ['conductSlab', 'thicknessM', (v) => conductSlab({ ...slab, thicknessM: v })],
  ['conductSlab', 'nodes', (v) => conductSlab({ ...slab, nodes: v })],
  ['conductSlab', 'conductivityWPerMK', (v) => conductSlab({ ...slab, conductivityWPerMK: v })],
  ['conductSlab', 'densityKgPerM3', (v) => conductSlab({ ...slab, densityKgPerM3: v })],
  ['conductSlab', 'heatCapacityJPerKgK', (v) => conductSlab({ ...slab, heatCapacityJPerKgK: v })],
  ['conductSlab', 'initialTempC', (v) => conductSlab({ ...slab, initialTempC: v })],
  ['conductSlab', 'hot.tempC', (v) => conductSlab({ ...slab, hot: { tempC: v } })],
  ['conductSlab', 'cold.hWPerM2K', (v) => conductSlab({ ...slab, cold: { hWPerM2K: v, ambientC: 20 } })],
  ['conductSlab', 'cold.ambientC', (v) => conductSlab({ ...slab, cold: { hWPerM2K: 10, ambientC: v } })],
  ['conductSlab', 'durationS', (v) => conductSlab({ ...slab, durationS: v })],
  ['conductSlab', 'stepS', (v) => conductSlab({ ...slab, stepS: v })],
  ['mean', 'values', (v) => mean([1, v])],
  ['sampleSd', 'values', (v) => sampleSd([1, v])],
  ['lag1Autocorrelation', 'values', (v) => lag1Autocorrelation([1, v, 2])],
  ['tQuantile', 'p', (v) => tQuantile(v, 5)],
  ['tQuantile', 'df', (v) => tQuantile(0.9, v)],
  ['chiSquareQuantile', 'p', (v) => chiSquareQuantile(v, 5)],
  ['chiSquareQuantile', 'df', (v) => chiSquareQuantile(0.9, v)],
  ['fQuantile', 'p', (v) => fQuantile(v, 5, 7)],
  ['fQuantile', 'df1', (v) => fQuantile(0.9, v, 7)],
  ['fQuantile', 'df2', (v) => fQuantile(0.9, 5, v)],
  ['linearRegression', 'x', (v) => linearRegression([1, 2, v], [1, 2, 4])],
  ['linearRegression', 'y', (v) => linearRegression([1, 2, 3], [1, 2, v])],
  [
    'nonlinearLeastSquares',
    'start',
    (v) => nonlinearLeastSquares({ model: line, start: [v], x: [1, 2], y: [1, 3] }),
  ],
  [
    'nonlinearLeastSquares',
    'x',
    (v) => nonlinearLeastSquares({ model: line, start: [1], x: [1, v], y: [1, 3] }),
  ],
  [
    'nonlinearLeastSquares',
    'y',
    (v) => nonlinearLeastSquares({ model: line, start: [1], x: [1, 2], y: [1, v] }),
  ],
  ['oneWayAnova', 'groups', (v) => oneWayAnova([[1, 2], [3, v]])], // prettier-ignore
  ['individualsMovingRange', 'values', (v) => individualsMovingRange([1, v])],
  ['ewma', 'values', (v) => ewma([v], { lambda: 0.2, target: 0 })],
  ['ewma', 'lambda', (v) => ewma([1], { lambda: v, target: 0 })],
  ['ewma', 'target', (v) => ewma([1], { lambda: 0.2, target: v })],
  ['tabularCusum', 'values', (v) => tabularCusum([v], { target: 0, k: 0.5, h: 4 })],
  ['tabularCusum', 'target', (v) => tabularCusum([1], { target: v, k: 0.5, h: 4 })],
  ['tabularCusum', 'k', (v) => tabularCusum([1], { target: 0, k: v, h: 4 })],
  ['tabularCusum', 'h', (v) => tabularCusum([1], { target: 0, k: 0.5, h: v })],
  ['nelsonRules', 'z', (v) => nelsonRules([0, v])],
  ['processCapability', 'usl', (v) => processCapability({ ...capability, usl: v })],
  ['processCapability', 'lsl', (v) => processCapability({ ...capability, lsl: v })],
  ['processCapability', 'mean', (v) => processCapability({ ...capability, mean: v })],
  ['processCapability', 'sd', (v) => processCapability({ ...capability, sd: v })],
  ['dynamicTimeWarping', 'a', (v) => dynamicTimeWarping([v], [1])],
  ['dynamicTimeWarping', 'b', (v) => dynamicTimeWarping([1], [v])],
  ['dynamicTimeWarping', 'band', (v) => dynamicTimeWarping([1], [1], v)],
  ['discreteFrechet', 'p', (v) => discreteFrechet([[v, 0]], [[0, 0]])],
  ['discreteFrechet', 'q', (v) => discreteFrechet([[0, 0]], [[0, v]])],
  ['savitzkyGolayWeights', 'window', (v) => savitzkyGolayWeights({ ...window, window: v })],
  ['savitzkyGolayWeights', 'degree', (v) => savitzkyGolayWeights({ ...window, degree: v })],
  ['savitzkyGolayWeights', 'derivative', (v) => savitzkyGolayWeights({ ...window, derivative: v })],
  ['savitzkyGolayWeights', 'spacing', (v) => savitzkyGolayWeights({ ...window, spacing: v })],
  ['pchip', 'x', (v) => pchip([1, v], [1, 2])],
  ['pchip', 'y', (v) => pchip([1, 2], [1, v])],
  ['pchip(x, y)', 'at', (v) => pchip([1, 2], [1, 2])(v)],
  ['curveDeviation', 'reference', (v) => curveDeviation([v], [1])],
  ['curveDeviation', 'value', (v) => curveDeviation([1], [v])],
  ['timeWeighted8hPpm', 'ppm', (v) => timeWeighted8hPpm([{ ppm: v, hours: 1 }])],
  ['timeWeighted8hPpm', 'hours', (v) => timeWeighted8hPpm([{ ppm: 1, hours: v }])],
  ['wbgtIndoorC', 'tnwC', (v) => wbgtIndoorC(v, 30)],
  ['wbgtIndoorC', 'tgC', (v) => wbgtIndoorC(20, v)],
  ['nioshLimitsC', 'metabolicRateW', (v) => nioshLimitsC(v)],
  ['deltaE2000', 'lab1', (v) => deltaE2000([v, 0, 0], [50, 0, 0])],
  ['deltaE2000', 'lab2', (v) => deltaE2000([50, 0, 0], [50, v, 0])],
  ['labFromSrgb', 'rgb', (v) => labFromSrgb([0, 0, v])],
  ['planCurve', 'startTempC', (v) => planCurve(v, ramp(150, 600))],
  ['planCurve', 'targetTempC', (v) => planCurve(20, ramp(v, 600))],
  ['planCurve', 'durationS', (v) => planCurve(20, ramp(150, v))],
  ['solveStage', 'startTempC', (v) => solveStage({ ...solving, startTempC: v })],
  ['solveStage', 'wantedDoseMin', (v) => solveStage({ ...solving, wantedDoseMin: v })],
  ['solveStage', 'min', (v) => solveStage({ ...solving, min: v })],
  ['solveStage', 'max', (v) => solveStage({ ...solving, max: v })],
]

describe('an invalid number throws RangeError with the argument’s name (SCIENCE, “Contract”)', () => {
  it.each(numericArguments)('%s: %s', (_, argument, call) => {
    for (const value of notNumbers) {
      let thrown: unknown = null
      try {
        call(value)
      } catch (error) {
        thrown = error
      }
      expect(thrown).toBeInstanceOf(RangeError)
      // Every message begins with the way to the argument: points[1].tempC, values[0], hot.tempC.
      const way = String(thrown instanceof Error ? thrown.message : thrown).split(/[\s:]/)[0] ?? ''
      expect(way.split(/[.[\]]+/)).toContain(argument.split('.').at(-1))
    }
  })
})

describe('the shapes of the contract', () => {
  it('types are those that the contract names', () => {
    expectTypeOf<ThermocoupleType>().toEqualTypeOf<'K' | 'N' | 'J' | 'T'>()
    expectTypeOf(toleranceC).toEqualTypeOf<
      (type: ThermocoupleType, iecClass: 1 | 2 | 3, tempC: number) => number | null
    >()
    expectTypeOf<CurvePoint>().toEqualTypeOf<{ timeS: number; tempC: number }>()
    expectTypeOf<{ tempC: number }>().toExtend<Face>()
    expectTypeOf<{ hWPerM2K: number; ambientC: number }>().toExtend<Face>()
    expectTypeOf<'insulated'>().toExtend<Face>()
    expectTypeOf<{ kind: 'ramp' | 'hold'; targetTempC: number; durationS: number }>().toExtend<Stage>()
    expectTypeOf(dynamicTimeWarping).returns.toEqualTypeOf<number | null>()
    expectTypeOf(discreteFrechet).parameter(0).toEqualTypeOf<readonly (readonly [number, number])[]>()
    expectTypeOf<number[][]>().toExtend<Parameters<typeof oneWayAnova>[0]>()
    expectTypeOf(nelsonRules).returns.toEqualTypeOf<Record<1 | 2 | 3 | 4 | 5 | 6 | 7 | 8, number[]>>()
    expectTypeOf(pchip).returns.toEqualTypeOf<(at: number) => number>()
    expectTypeOf(checkCharacter37_36).toEqualTypeOf<(payload: string) => string>()
    expectTypeOf(isValid37_36).toEqualTypeOf<(text: string) => boolean>()
  })
  it.each([
    ['conductSlab', conductSlab(slab), ['depthM', 'tempC']],
    [
      'linearRegression',
      linearRegression([1, 2, 3], [1, 2, 4]),
      ['intercept', 'slope', 'interceptSd', 'slopeSd', 'residualSd', 'rSquared'],
    ],
    [
      'nonlinearLeastSquares',
      nonlinearLeastSquares({ model: line, start: [1], x: [1, 2, 3], y: [1, 2, 4] }),
      ['parameters', 'standardErrors', 'residualSumOfSquares', 'residualSd'],
    ],
    [
      'oneWayAnova',
      oneWayAnova([[1, 2], [3, 5]]), // prettier-ignore
      ['ssBetween', 'ssWithin', 'dfBetween', 'dfWithin', 'msBetween', 'msWithin', 'f', 'p'],
    ],
    ['individualsMovingRange', individualsMovingRange([1, 2]), ['mean', 'meanMovingRange', 'ucl', 'lcl']],
    ['tabularCusum', tabularCusum([1], { target: 0, k: 0.5, h: 4 }), ['high', 'low']],
    ['processCapability', processCapability(capability), ['cp', 'cpk', 'cpu', 'cpl']],
    ['curveDeviation', curveDeviation([1], [2]), ['rmse', 'mae', 'bias', 'maxAbs']],
    ['nioshLimitsC', nioshLimitsC(300), ['ral', 'rel']],
  ])('%s gives the keys that the contract names', (_, result, keys) => {
    expect(Object.keys(result)).toEqual(expect.arrayContaining(keys))
  })
})

describe('what the contract says beside its names', () => {
  it('the direct thermocouple functions cover their full range, the inverses end at theirs', () => {
    for (const type of ['K', 'N', 'T'] as const) expect(emfMv(type, -270)).toBeLessThan(emfMv(type, -200))
    expect(() => tempCFromEmf('K', emfMv('K', -250))).toThrow(RangeError)
  })
  it('a base that is left out means no base', () => {
    const { baseTempC: _, ...noBase } = model
    expect(doseRate(model, 100)).toBe(0)
    expectWithin(doseRate(noBase, 100), 10 ** (-100 / 34), 1e-15)
  })
  it('two equal times are a step, a falling time is refused', () => {
    const step = [...hold(10, 150), { timeS: 600, tempC: 200 }, { timeS: 1200, tempC: 200 }]
    expectWithin(equivalentMinutes(model, step), 10 * 10 ** (-50 / 34) + 10, 1e-12)
    expect(() => equivalentMinutes(model, [...step].reverse())).toThrow(/timeS/)
  })
  it('a hold keeps the temperature reached before it', () => {
    const stages: Stage[] = [...ramp(150, 600), { kind: 'hold', targetTempC: 150, durationS: 60 }]
    expect(planCurve(20, stages)).toHaveLength(3)
    expect(() =>
      planCurve(20, [...ramp(150, 600), { kind: 'hold', targetTempC: 151, durationS: 60 }]),
    ).toThrow(RangeError)
  })
  it('nodes include both faces, depth counts from the hot one', () => {
    const { depthM, tempC } = conductSlab(slab)
    expect(depthM).toHaveLength(5)
    expect([depthM[0], depthM.at(-1)]).toEqual([0, 0.027])
    expect(tempC[0]).toBe(200)
  })
  it('a quantile’s p is the lower tail', () => {
    expect(tQuantile(0.9, 5)).toBeGreaterThan(0)
    expect(chiSquareQuantile(0.9, 5)).toBeGreaterThan(chiSquareQuantile(0.1, 5))
    expect(fQuantile(0.9, 5, 7)).toBeGreaterThan(fQuantile(0.1, 5, 7))
  })
  it('EWMA has the target first; CUSUM sums have no start value and no reset', () => {
    expect(ewma([2, 2], { lambda: 0.5, target: 0 })).toEqual([0, 1, 1.5])
    expect(tabularCusum([3, 3, 3], { target: 0, k: 1, h: 2 }).high).toEqual([2, 4, 6])
  })
  it('Savitzky–Golay weights are for the centre, oldest first, divided by spacing^derivative', () => {
    const weights = savitzkyGolayWeights({ window: 3, degree: 1, derivative: 1, spacing: 2 })
    weights.forEach((weight, i) => expectWithin(weight, [-0.25, 0, 0.25][i] ?? NaN, 1e-15))
  })
  it('a curve’s deviation is the value minus the reference', () => {
    expect(curveDeviation([10, 10], [11, 13]).bias).toBe(2)
  })
  it('no path inside the band is null', () => {
    expect(dynamicTimeWarping([1, 2, 3], [1], 1)).toBeNull()
  })
  it('serials: SML-0427 has the check character P', () => {
    expect(checkCharacter37_36('SML-0427')).toBe('P')
  })
})
