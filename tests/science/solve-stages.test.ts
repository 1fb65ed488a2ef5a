import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { DoseModel } from '../../lib/science/heat-dose'
import type { LimitedMove, Stage } from '../../lib/science/plan'
import { moveStage, planDose, solveStage } from '../../lib/science/plan'
import { findRoot } from '../../lib/science/root'
import type { PlannedStave, SolveStagesRequest } from '../../lib/science/solve-stages'
import { planDoseAtDepth, planToastDepthMm, solveStages } from '../../lib/science/solve-stages'
import { expectRangeError, expectWithin, notNumbers, propertyRun } from './published-checks'

const model: DoseModel = { refTempC: 200, zC: 34, baseTempC: 120 }
const startTempC = 60
const stages: Stage[] = [
  { kind: 'ramp', targetTempC: 140, durationS: 720 },
  { kind: 'ramp', targetTempC: 185, durationS: 480 },
  { kind: 'hold', targetTempC: 185, durationS: 1080 },
  { kind: 'ramp', targetTempC: 200, durationS: 420 },
]
const stave: PlannedStave = {
  thicknessMm: 27,
  probeDepthMm: 2,
  moisturePercent: 20,
  specificGravity: 0.64,
  roomTempC: 20,
  coldFaceHWPerM2K: 10,
  toastDepthDoseMin: 0.1,
  probeDepthErrorMm: 0.5,
  diffusivityErrorShare: 0.2,
}

const minutes: LimitedMove = { stageIndex: 2, vary: 'minutes', min: 5, max: 40 }
const temperature: LimitedMove = { stageIndex: 2, vary: 'temperature', min: 150, max: 215 }
const request: SolveStagesRequest = {
  startTempC,
  stages,
  moves: [minutes],
  wanted: { what: 'dose', doseMin: 15 },
  model,
  stave,
}

const anyMove = fc.oneof(
  fc
    .record({
      stageIndex: fc.integer({ min: 0, max: 3 }),
      min: fc.double({ min: 1, max: 20, noNaN: true }),
      span: fc.double({ min: 0, max: 40, noNaN: true }),
    })
    .map(({ stageIndex, min, span }): LimitedMove => ({ stageIndex, vary: 'minutes', min, max: min + span })),
  fc
    .record({
      stageIndex: fc.integer({ min: 0, max: 3 }),
      min: fc.double({ min: 125, max: 200, noNaN: true }),
      span: fc.double({ min: 0, max: 40, noNaN: true }),
    })
    .map(({ stageIndex, min, span }): LimitedMove => ({
      stageIndex,
      vary: 'temperature',
      min,
      max: min + span,
    })),
)

/** What moves, so that two moves of one plateau are left out. */
const thing = ({ vary, stageIndex }: LimitedMove) =>
  vary === 'minutes' ? `minutes ${stageIndex}` : `temperature ${stageIndex === 2 ? 1 : stageIndex}`

const anyMoves = fc
  .array(anyMove, { minLength: 1, maxLength: 2 })
  .filter(([first, second]) => first === undefined || second === undefined || thing(first) !== thing(second))

describe('solving one or two stages for a dose', () => {
  it('law: dose ∘ solve is identity, inside the limits, both at one share; or the range does not hold it', () => {
    fc.assert(
      fc.property(anyMoves, fc.double({ min: 0.2, max: 300, noNaN: true }), (moves, doseMin) => {
        const result = solveStages({ ...request, moves, wanted: { what: 'dose', doseMin } })
        if (!result.feasible) {
          expect(doseMin < result.attainableMin || doseMin > result.attainableMax).toBe(true)
          return
        }
        expectWithin(planDose(model, startTempC, result.stages), doseMin, 1e-8 * doseMin)
        expect(result.values).toHaveLength(moves.length)
        moves.forEach((move, i) => {
          expectWithin(result.values[i] ?? NaN, move.min + result.share * (move.max - move.min), 1e-9)
          expect(result.values[i]).toBeGreaterThanOrEqual(move.min)
          expect(result.values[i]).toBeLessThanOrEqual(move.max + 1e-12)
        })
      }),
      propertyRun,
    )
  })

  it('law: whatever the limits allow at a share is found again, and more dose asks a larger share', () => {
    const share = fc.double({ min: 0.01, max: 0.99, noNaN: true })
    fc.assert(
      fc.property(anyMoves, share, share, (moves, first, second) => {
        const shareOf = (at: number) => {
          const made = moves.reduce<Stage[]>(
            (plan, move) => moveStage(plan, move, move.min + at * (move.max - move.min)),
            stages,
          )
          const doseMin = planDose(model, startTempC, made)
          const result = solveStages({ ...request, moves, wanted: { what: 'dose', doseMin } })
          expect(result.feasible).toBe(true)
          if (!result.feasible) return NaN
          expectWithin(planDose(model, startTempC, result.stages), doseMin, 1e-8 * doseMin)
          return result.share
        }
        const [low, high] = [shareOf(Math.min(first, second)), shareOf(Math.max(first, second))]
        expect(low).toBeLessThanOrEqual(high + 1e-6)
      }),
      { ...propertyRun, numRuns: 100 },
    )
  })

  it('with one move it is the plan’s own solver', () => {
    for (const move of [minutes, temperature]) {
      const one = solveStage({ ...move, startTempC, stages, wantedDoseMin: 15, model })
      const result = solveStages({ ...request, moves: [move] })
      expectWithin(result.feasible ? (result.values[0] ?? NaN) : NaN, one.feasible ? one.value : NaN, 1e-6)
    }
  })

  it('longer and hotter together: both give a part of what either would give alone', () => {
    const both = solveStages({ ...request, moves: [minutes, temperature] })
    const [moreMinutes = NaN, moreC = NaN] = both.feasible ? both.values : []
    expectWithin((moreMinutes - 5) / 35, (moreC - 150) / 65, 1e-9)
  })
})

describe('solving for what the stave model says', () => {
  it('dose at a depth: the solved plan has it, more needs a larger share', () => {
    let lastShare = 0
    for (const doseMin of [0.5, 1, 2, 4]) {
      const wanted = { what: 'dose at depth', depthMm: 5, doseMin } as const
      const result = solveStages({ ...request, moves: [minutes, temperature], wanted })
      if (!result.feasible) expect.fail(`${doseMin} min at 5 mm should be possible`)
      const has = planDoseAtDepth(stave, model, startTempC, result.stages, 5)
      expectWithin(Math.log10(has / doseMin), 0, 1e-3)
      expectWithin(result.reached, has, 1e-9 * has)
      expect(result.share).toBeGreaterThan(lastShare)
      lastShare = result.share
    }
  })

  it('toast depth: the solved plan has it, deeper needs longer', () => {
    let lastMinutes = 0
    for (const depthMm of [7, 8, 9]) {
      const wanted = { what: 'toast depth', depthMm } as const
      const result = solveStages({ ...request, wanted })
      if (!result.feasible) expect.fail(`${depthMm} mm should be possible`)
      expectWithin(planToastDepthMm(stave, model, startTempC, result.stages).value, depthMm, 0.02)
      expect(result.values[0]).toBeGreaterThan(lastMinutes)
      lastMinutes = result.values[0] ?? NaN
    }
  })

  it('at the lead probe’s depth it is the plan’s own dose, to the model’s step', () => {
    const exact = planDose(model, startTempC, stages)
    expectWithin(planDoseAtDepth(stave, model, startTempC, stages, 2) / exact, 1, 1e-9)
  })

  it('what the limits can not reach is refused with the range that they can', () => {
    const deep = solveStages({ ...request, wanted: { what: 'toast depth', depthMm: 20 } })
    expect(deep).toMatchObject({ feasible: false, unattainable: null })
    if (!deep.feasible) {
      const [least, most] = [5, 40].map(
        (value) =>
          planToastDepthMm(
            stave,
            model,
            startTempC,
            stages.map((stage, i) => (i === 2 ? { ...stage, durationS: value * 60 } : stage)),
          ).value,
      )
      expect(deep.attainableMin).toBe(least)
      expect(deep.attainableMax).toBe(most)
    }
    const hot = solveStages({ ...request, wanted: { what: 'dose at depth', depthMm: 10, doseMin: 50 } })
    expect(hot.feasible).toBe(false)
  })
})

describe('what solving refuses', () => {
  it('names what is wrong with the request', () => {
    expectRangeError('moves', () => solveStages({ ...request, moves: [] }))
    expectRangeError('moves', () => solveStages({ ...request, moves: [minutes, minutes, minutes] }))
    expectRangeError('moves', () => solveStages({ ...request, moves: [minutes, minutes] }))
    expectRangeError('moves', () =>
      solveStages({ ...request, moves: [temperature, { ...temperature, stageIndex: 1 }] }),
    )
    expectRangeError('moves[1].stageIndex', () =>
      solveStages({ ...request, moves: [minutes, { ...minutes, stageIndex: 9 }] }),
    )
    expectRangeError('moves[0].max', () => solveStages({ ...request, moves: [{ ...minutes, max: 1 }] }))
    expectRangeError('moves[0].min', () => solveStages({ ...request, moves: [{ ...minutes, min: -1 }] }))
    const { stave: _, ...without } = request
    expectRangeError('stave', () => solveStages({ ...without, wanted: { what: 'toast depth', depthMm: 5 } }))
    expectRangeError('wanted.depthMm', () =>
      solveStages({ ...request, wanted: { what: 'dose at depth', depthMm: 28, doseMin: 1 } }),
    )
    for (const value of [...notNumbers, 0, -1]) {
      expectRangeError('wanted.doseMin', () =>
        solveStages({ ...request, wanted: { what: 'dose', doseMin: value } }),
      )
      expectRangeError('wanted.depthMm', () =>
        solveStages({ ...request, wanted: { what: 'toast depth', depthMm: value } }),
      )
    }
  })
})

describe('the root finder', () => {
  it('finds a root that is known, at an end as well, and the place of a jump', () => {
    expectWithin(
      findRoot((x) => x ** 3 - 2, 0, 2),
      Math.cbrt(2),
      1e-12,
    )
    expect(findRoot((x) => x, 0, 1)).toBe(0)
    expect(findRoot((x) => x - 1, 0, 1)).toBe(1)
    expectWithin(
      findRoot((x) => (x < 0.3 ? -1 : 1), 0, 1),
      0.3,
      1e-12,
    )
  })
  it('law: brackets any root of a rising function', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -50, max: 50, noNaN: true }),
        fc.double({ min: 0.01, max: 9, noNaN: true }),
        (root, steep) => {
          const found = findRoot((x) => Math.expm1((x - root) / steep), -60, 60)
          expectWithin(found, root, 1e-9)
        },
      ),
      propertyRun,
    )
  })
  it('refuses two ends of one sign', () => {
    expectRangeError('low and high', () => findRoot((x) => x * x + 1, -1, 1))
    expectRangeError('low and high', () => findRoot(() => NaN, -1, 1))
  })
})
