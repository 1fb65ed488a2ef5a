import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import * as z from 'zod'
import type { Face, SlabInput, SlabResult } from '../../lib/science/conduction'
import { conductSlab } from '../../lib/science/conduction'
import {
  expectRangeError,
  expectWithin,
  notNumbers,
  numberShape,
  numbersShape,
  propertyRun,
  tableShape,
  testPublished,
  toleranceOf,
} from './published-checks'

/** A slab of unit capacity per volume and of the given diffusivity, so that k is the diffusivity too. */
function slabOf(over: Partial<SlabInput> & { hot: Face; cold: Face }, alpha: number): SlabResult {
  return conductSlab({
    thicknessM: 1,
    nodes: 201,
    conductivityWPerMK: alpha,
    densityKgPerM3: 1,
    heatCapacityJPerKgK: 1,
    initialTempC: 1,
    durationS: 1,
    stepS: 1e-3,
    ...over,
  })
}

/** θ in the half wall of thickness 1: the middle plane is the insulated face, Bi acts on the hot one. */
function wallTheta(biot: number, fourier: number, xStar: number, nodes = 201): number {
  const { tempC } = slabOf(
    {
      nodes,
      hot: { hWPerM2K: biot, ambientC: 0 },
      cold: 'insulated',
      durationS: fourier,
      stepS: fourier / (nodes - 1),
    },
    1,
  )
  return tempC[Math.round((1 - xStar) * (nodes - 1))] ?? NaN
}

describe('plane wall with convection', () => {
  testPublished('cond.plane_wall_theta', (check) => {
    const expected = numbersShape.parse(check.expected)
    tableShape
      .parse(check.inputs.Bi_Fo_xstar)
      .forEach(([biot = NaN, fourier = NaN, xStar = NaN], i) =>
        expectWithin(
          wallTheta(biot, fourier, xStar),
          expected[i] ?? NaN,
          toleranceOf(check, 'crank_nicolson_abs'),
        ),
      )
  })
  testPublished('cond.plane_wall_zeta1_C1', (check) => {
    // One term holds beyond Fo 0.2: the middle plane decays as C1·exp(−ζ1²·Fo). The printed ζ1 has four decimals.
    const biots = numbersShape.parse(check.inputs.Bi)
    const expected = tableShape.parse(check.expected)
    biots.forEach((biot, i) => {
      const [zeta = NaN, c1 = NaN] = expected[i] ?? []
      const fourier = 0.6
      const wanted = c1 * Math.exp(-zeta * zeta * fourier)
      const printed = 2 * zeta * fourier * 5.1e-5 + 5.1e-5
      expectWithin(wallTheta(biot, fourier, 0), wanted, wanted * printed + 1e-4)
    })
  })
  it('halving both steps divides the error by about four (second order)', () => {
    // The series of cond.wall.series.a at Bi 1, Fo 0.2, x* 1.
    const exact = 0.6433907845
    const coarse = Math.abs(wallTheta(1, 0.2, 1, 21) - exact)
    const fine = Math.abs(wallTheta(1, 0.2, 1, 41) - exact)
    expect(coarse / fine).toBeGreaterThan(3.5)
    expect(coarse / fine).toBeLessThan(4.5)
  })
})

describe('half space, as a slab too thick for its far face to matter', () => {
  const shape = z.object({ Ti_C: z.number(), x_m: z.number(), t_s: z.number(), alpha_m2_s: z.number() })
  /** Thickness of ten diffusion lengths, rounded so that the asked depth is a node. */
  function gridFor(
    depthM: number,
    alpha: number,
    timeS: number,
  ): { thicknessM: number; nodes: number; node: number } {
    const reachM = 10 * Math.sqrt(alpha * timeS)
    const node = depthM === 0 ? 0 : 200
    const cellM = depthM === 0 ? reachM / 4000 : depthM / node
    const nodes = Math.ceil(reachM / cellM) + 1
    return { thicknessM: (nodes - 1) * cellM, nodes, node }
  }
  testPublished('cond.semi_infinite_step_C', (check) => {
    const { Ti_C, x_m, t_s, alpha_m2_s } = shape.parse(check.inputs)
    const { node, ...grid } = gridFor(x_m, alpha_m2_s, t_s)
    const hot = { tempC: numberShape.parse(check.inputs.Ts_C) }
    const { tempC } = slabOf(
      { ...grid, hot, cold: 'insulated', initialTempC: Ti_C, durationS: t_s, stepS: t_s / 1000 },
      alpha_m2_s,
    )
    // The value is printed to 1e-5 °C; this grid is held to 2e-3.
    expectWithin(tempC[node] ?? NaN, numberShape.parse(check.expected), 2e-3)
  })
  testPublished('cond.semi_infinite_convection_C', (check) => {
    const { Ti_C, x_m, t_s, alpha_m2_s } = shape.parse(check.inputs)
    const { node, ...grid } = gridFor(x_m, alpha_m2_s, t_s)
    const k = numberShape.parse(check.inputs.k_W_mK)
    const { tempC } = conductSlab({
      ...grid,
      conductivityWPerMK: k,
      densityKgPerM3: k / alpha_m2_s,
      heatCapacityJPerKgK: 1,
      initialTempC: Ti_C,
      hot: {
        hWPerM2K: numberShape.parse(check.inputs.h_W_m2K),
        ambientC: numberShape.parse(check.inputs.Tinf_C),
      },
      cold: 'insulated',
      durationS: t_s,
      stepS: t_s / 1000,
    })
    expectWithin(tempC[node] ?? NaN, numberShape.parse(check.expected), 2e-3)
  })
  testPublished('cond.semi_infinite_depth_m', (check) => {
    // The depth at which a cooled half space reaches T: the slab has T there (printed 0.68 m).
    const inputs = z
      .object({
        Ti_C: z.number(),
        Ts_C: z.number(),
        T_C: z.number(),
        alpha_m2_s: z.number(),
        t_days: z.number(),
      })
      .parse(check.inputs)
    const durationS = inputs.t_days * 86_400
    const { depthM, tempC } = slabOf(
      {
        thicknessM: 8,
        nodes: 1601,
        hot: { tempC: inputs.Ts_C },
        cold: 'insulated',
        initialTempC: inputs.Ti_C,
        durationS,
        stepS: durationS / 1000,
      },
      inputs.alpha_m2_s,
    )
    const i = tempC.findIndex((temp) => temp >= inputs.T_C)
    const [t1 = NaN, t2 = NaN] = [tempC[i - 1], tempC[i]]
    const depth =
      (depthM[i - 1] ?? NaN) + (((depthM[i] ?? NaN) - (depthM[i - 1] ?? NaN)) * (inputs.T_C - t1)) / (t2 - t1)
    // The printed example rounds erf⁻¹(0.4286) to 0.40.
    expectWithin(depth, numberShape.parse(check.expected), 0.003)
  })
})

describe('laws of conduction', () => {
  const convecting = fc.record({
    hWPerM2K: fc.double({ min: 0, max: 200, noNaN: true }),
    ambientC: fc.double({ min: -20, max: 400, noNaN: true }),
  })
  const fixed = fc.record({ tempC: fc.double({ min: -20, max: 400, noNaN: true }) })
  const face: fc.Arbitrary<Face> = fc.oneof(convecting, fixed, fc.constant('insulated' as const))
  const slabs = fc.record({
    thicknessM: fc.double({ min: 0.005, max: 0.06, noNaN: true }),
    nodes: fc.integer({ min: 3, max: 60 }),
    conductivityWPerMK: fc.double({ min: 0.1, max: 0.4, noNaN: true }),
    densityKgPerM3: fc.double({ min: 400, max: 900, noNaN: true }),
    heatCapacityJPerKgK: fc.double({ min: 1000, max: 3000, noNaN: true }),
    initialTempC: fc.double({ min: -20, max: 300, noNaN: true }),
    hot: face,
    cold: face,
    durationS: fc.double({ min: 1, max: 3600, noNaN: true }),
    stepS: fc.double({ min: 0.5, max: 600, noNaN: true }),
  })
  it('law: what the slab gains is what came in through its faces, to 1e-9', () => {
    fc.assert(
      fc.property(slabs, (input) => {
        const { tempC, heatInJPerM2 } = conductSlab(input)
        const cellJ =
          (input.densityKgPerM3 * input.heatCapacityJPerKgK * input.thicknessM) / (input.nodes - 1)
        const gainJ = tempC.reduce((sum, temp, i) => {
          const share = i === 0 || i === input.nodes - 1 ? 0.5 : 1
          return sum + share * cellJ * (temp - input.initialTempC)
        }, 0)
        const size = cellJ * input.nodes * 500
        expectWithin(heatInJPerM2.hot + heatInJPerM2.cold, gainJ, 1e-9 * size)
      }),
      propertyRun,
    )
  })
  it('law: with both faces insulated nothing changes, and no heat comes in', () => {
    fc.assert(
      fc.property(slabs, (input) => {
        const { tempC, heatInJPerM2 } = conductSlab({ ...input, hot: 'insulated', cold: 'insulated' })
        for (const temp of tempC) expectWithin(temp, input.initialTempC, 1e-9)
        expect(heatInJPerM2).toEqual({ hot: 0, cold: 0 })
      }),
      propertyRun,
    )
  })
  /** Temperature of a face's surroundings; null where it is insulated. */
  const outsideOf = (side: Face) =>
    side === 'insulated' ? null : 'tempC' in side ? side.tempC : side.hWPerM2K === 0 ? null : side.ambientC
  it('law: no wood is hotter or colder than the hottest and coldest it began with or was given (maximum principle)', () => {
    fc.assert(
      fc.property(slabs, fc.double({ min: 0.01, max: 0.5, noNaN: true }), (input, fourier) => {
        // At most half a cell's diffusion time a step. Larger ones are stable but may overshoot once after a sudden
        // face, as an implicit scheme of second order can: measured, 3 % of the jump at twice that step, 23 % at 200 times.
        const cellM = input.thicknessM / (input.nodes - 1)
        const alpha = input.conductivityWPerMK / (input.densityKgPerM3 * input.heatCapacityJPerKgK)
        const stepS = (fourier * cellM * cellM) / alpha
        const durationS = Math.min(input.durationS, 400 * stepS)
        const { tempC } = conductSlab({ ...input, stepS, durationS })
        const given = [input.initialTempC, outsideOf(input.hot), outsideOf(input.cold)].filter(
          (t) => t !== null,
        )
        for (const temp of tempC) {
          expect(temp).toBeLessThanOrEqual(Math.max(...given) + 1e-9)
          expect(temp).toBeGreaterThanOrEqual(Math.min(...given) - 1e-9)
        }
      }),
      propertyRun,
    )
  })
  it('law: with constant properties two causes add: temperatures given as a sum give the sum (superposition)', () => {
    const temps = fc.tuple(
      fc.double({ min: -20, max: 300, noNaN: true }),
      fc.double({ min: -20, max: 400, noNaN: true }),
      fc.double({ min: -20, max: 400, noNaN: true }),
    )
    const withOutside = (side: Face, outsideC: number): Face =>
      side === 'insulated'
        ? side
        : 'tempC' in side
          ? { tempC: outsideC }
          : { hWPerM2K: side.hWPerM2K, ambientC: outsideC }
    fc.assert(
      fc.property(
        slabs,
        temps,
        temps,
        fc.double({ min: -2, max: 2, noNaN: true }),
        (input, first, second, share) => {
          const run = ([initialTempC, hotC, coldC]: readonly [number, number, number]) =>
            conductSlab({
              ...input,
              initialTempC,
              hot: withOutside(input.hot, hotC),
              cold: withOutside(input.cold, coldC),
            })
          const add = (a: number, b: number) => a + share * b
          const a = run(first)
          const b = run(second)
          const sum = run([add(first[0], second[0]), add(first[1], second[1]), add(first[2], second[2])])
          sum.tempC.forEach((temp, i) => expectWithin(temp, add(a.tempC[i] ?? NaN, b.tempC[i] ?? NaN), 1e-8))
          const size = 1 + Math.abs(a.heatInJPerM2.hot) + Math.abs(b.heatInJPerM2.hot)
          expectWithin(sum.heatInJPerM2.hot, add(a.heatInJPerM2.hot, b.heatInJPerM2.hot), 1e-8 * size)
        },
      ),
      propertyRun,
    )
  })
  it('after long enough the slab has its steady state', () => {
    const base = {
      thicknessM: 0.027,
      nodes: 28,
      conductivityWPerMK: 0.18,
      densityKgPerM3: 700,
      heatCapacityJPerKgK: 1700,
      initialTempC: 20,
      durationS: 1e6,
      stepS: 500,
    }
    const line = conductSlab({ ...base, hot: { tempC: 200 }, cold: { tempC: 40 } })
    line.tempC.forEach((temp, i) => expectWithin(temp, 200 - (160 * (line.depthM[i] ?? NaN)) / 0.027, 1e-6))
    // Series resistance: 1/h + L/k + 1/h.
    const air = conductSlab({
      ...base,
      hot: { hWPerM2K: 40, ambientC: 300 },
      cold: { hWPerM2K: 10, ambientC: 20 },
    })
    const flux = 280 / (1 / 40 + 0.027 / 0.18 + 1 / 10)
    expectWithin(air.tempC[0] ?? NaN, 300 - flux / 40, 1e-6)
    expectWithin(air.tempC.at(-1) ?? NaN, 20 + flux / 10, 1e-6)
  })
  it('the depth counts from the hot face, and a face may be colder than the wood', () => {
    const { depthM, tempC } = slabOf(
      { nodes: 5, hot: { tempC: -10 }, cold: { tempC: 30 }, initialTempC: 20 },
      1e-3,
    )
    expect(depthM).toEqual([0, 0.25, 0.5, 0.75, 1])
    expect(tempC[0]).toBe(-10)
    expect(tempC[4]).toBe(30)
    expect(tempC[1]).toBeLessThan(20)
  })
  it('law: at 0 s the slab is as it began, and turned round it is the same slab', () => {
    expect(slabOf({ nodes: 4, hot: { tempC: 100 }, cold: 'insulated', durationS: 0 }, 1).tempC).toEqual([
      1, 1, 1, 1,
    ])
    fc.assert(
      fc.property(slabs, (input) => {
        const turned = conductSlab({ ...input, hot: input.cold, cold: input.hot })
        const straight = conductSlab(input)
        straight.tempC.forEach((temp, i) => expectWithin(turned.tempC.at(-1 - i) ?? NaN, temp, 1e-8))
      }),
      propertyRun,
    )
  })
  it('any step is stable: one huge step stays near what it must come to', () => {
    const { tempC } = conductSlab({
      thicknessM: 0.027,
      nodes: 55,
      conductivityWPerMK: 0.18,
      densityKgPerM3: 700,
      heatCapacityJPerKgK: 1700,
      initialTempC: 20,
      hot: { tempC: 220 },
      cold: 'insulated',
      durationS: 1e7,
      stepS: 1e7,
    })
    for (const temp of tempC) expectWithin(temp, 220, 1)
  })
  it('names what is outside the domain', () => {
    const good: SlabInput = {
      thicknessM: 0.027,
      nodes: 10,
      conductivityWPerMK: 0.18,
      densityKgPerM3: 700,
      heatCapacityJPerKgK: 1700,
      initialTempC: 20,
      hot: { tempC: 200 },
      cold: { hWPerM2K: 10, ambientC: 20 },
      durationS: 60,
      stepS: 1,
    }
    for (const name of [
      'thicknessM',
      'nodes',
      'conductivityWPerMK',
      'densityKgPerM3',
      'heatCapacityJPerKgK',
      'stepS',
    ] as const) {
      for (const value of [...notNumbers, 0, -1])
        expectRangeError(name, () => conductSlab({ ...good, [name]: value }))
    }
    for (const value of [...notNumbers, -1])
      expectRangeError('durationS', () => conductSlab({ ...good, durationS: value }))
    for (const value of notNumbers) {
      expectRangeError('initialTempC', () => conductSlab({ ...good, initialTempC: value }))
      expectRangeError('hot.tempC', () => conductSlab({ ...good, hot: { tempC: value } }))
      expectRangeError('cold.ambientC', () =>
        conductSlab({ ...good, cold: { hWPerM2K: 1, ambientC: value } }),
      )
      expectRangeError('cold.hWPerM2K', () =>
        conductSlab({ ...good, cold: { hWPerM2K: value, ambientC: 1 } }),
      )
    }
  })
})
