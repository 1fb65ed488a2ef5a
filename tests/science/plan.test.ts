import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { DoseModel } from '../../lib/science/heat-dose'
import { equivalentMinutes } from '../../lib/science/heat-dose'
import type { Stage } from '../../lib/science/plan'
import { planCurve, planDose, planStageAt, planTempCAt, solveStage } from '../../lib/science/plan'
import { expectRangeError, expectWithin, notNumbers, propertyRun } from './published-checks'

const model: DoseModel = { refTempC: 200, zC: 34, baseTempC: 120 }
const stages: Stage[] = [
  { kind: 'ramp', targetTempC: 150, durationS: 900 },
  { kind: 'hold', targetTempC: 150, durationS: 600 },
  { kind: 'ramp', targetTempC: 200, durationS: 600 },
  { kind: 'hold', targetTempC: 200, durationS: 900 },
]
const startTempC = 30

describe('plan curve', () => {
  it('has a point at the start and at each stage end', () => {
    expect(planCurve(startTempC, stages)).toEqual([
      { timeS: 0, tempC: 30 },
      { timeS: 900, tempC: 150 },
      { timeS: 1500, tempC: 150 },
      { timeS: 2100, tempC: 200 },
      { timeS: 3000, tempC: 200 },
    ])
  })
  it('the dose of a plan is that of its curve, and of any finer sampling of it', () => {
    const points = planCurve(startTempC, stages)
    const sampled = Array.from({ length: 3001 }, (_, timeS) => ({
      timeS,
      tempC: planTempCAt(points, timeS) ?? NaN,
    }))
    const dose = planDose(model, startTempC, stages)
    expect(dose).toBe(equivalentMinutes(model, points))
    expectWithin(equivalentMinutes(model, sampled), dose, 1e-9 * dose)
  })
  it('the planned temperature is straight between points, later at a step, unknown outside', () => {
    const points = planCurve(startTempC, stages)
    expect(planTempCAt(points, 450)).toBe(90)
    expect(planTempCAt(points, 0)).toBe(30)
    expect(planTempCAt(points, 3000)).toBe(200)
    expect(planTempCAt(points, -1)).toBeNull()
    expect(planTempCAt(points, 3001)).toBeNull()
    expect(planTempCAt(planCurve(20, [{ kind: 'ramp', targetTempC: 150, durationS: 0 }]), 0)).toBe(150)
  })
  it('the stage at a time is the later one at a boundary and the last at the end', () => {
    expect(planStageAt(stages, 0)).toEqual({ stageIndex: 0, startS: 0, endS: 900 })
    expect(planStageAt(stages, 900)?.stageIndex).toBe(1)
    expect(planStageAt(stages, 3000)?.stageIndex).toBe(3)
    expect(planStageAt(stages, 3001)).toBeNull()
  })
  it('refuses a hold that leaves its temperature, negative minutes, no stages, what is no number', () => {
    expectRangeError('stages[0].targetTempC', () =>
      planCurve(30, [{ kind: 'hold', targetTempC: 31, durationS: 60 }]),
    )
    expectRangeError('stages[0].durationS', () =>
      planCurve(30, [{ kind: 'ramp', targetTempC: 31, durationS: -1 }]),
    )
    expectRangeError('stages', () => planCurve(30, []))
    for (const value of notNumbers) {
      expectRangeError('startTempC', () => planCurve(value, stages))
      expectRangeError('stages[0].targetTempC', () =>
        planCurve(30, [{ kind: 'ramp', targetTempC: value, durationS: 60 }]),
      )
      expectRangeError('stages[0].durationS', () =>
        planCurve(30, [{ kind: 'ramp', targetTempC: 90, durationS: value }]),
      )
      expectRangeError('timeS', () => planTempCAt(planCurve(30, stages), value))
    }
  })
})

describe('solving a stage', () => {
  const limits = { minutes: { min: 1, max: 90 }, temperature: { min: 125, max: 240 } }

  it('law: gives the wanted dose, or the attainable range that does not hold it', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 3 }),
        fc.constantFrom('minutes' as const, 'temperature' as const),
        fc.double({ min: 0.5, max: 400, noNaN: true }),
        (stageIndex, vary, wantedDoseMin) => {
          const result = solveStage({
            startTempC,
            stages,
            stageIndex,
            vary,
            wantedDoseMin,
            model,
            ...limits[vary],
          })
          if (result.feasible) {
            expectWithin(planDose(model, startTempC, result.stages), wantedDoseMin, 1e-9 * wantedDoseMin)
            expect(result.value).toBeGreaterThanOrEqual(limits[vary].min)
            expect(result.value).toBeLessThanOrEqual(limits[vary].max)
          } else {
            expect(wantedDoseMin < result.attainableMin || wantedDoseMin > result.attainableMax).toBe(true)
          }
        },
      ),
      propertyRun,
    )
  })
  it('finds again the minutes and the temperature that a dose was made with', () => {
    const wantedDoseMin = planDose(model, startTempC, stages)
    const minutes = solveStage({
      startTempC,
      stages,
      stageIndex: 3,
      vary: 'minutes',
      wantedDoseMin,
      model,
      min: 1,
      max: 60,
    })
    expectWithin(minutes.feasible ? minutes.value : NaN, 15, 1e-9)
    for (const stageIndex of [2, 3]) {
      const found = solveStage({
        startTempC,
        stages,
        stageIndex,
        vary: 'temperature',
        wantedDoseMin,
        model,
        min: 130,
        max: 240,
      })
      expectWithin(found.feasible ? found.value : NaN, 200, 1e-7)
    }
  })
  it('moves a hold with the ramp that reaches it, and leaves the request as it was', () => {
    const before = structuredClone(stages)
    const result = solveStage({
      startTempC,
      stages,
      stageIndex: 1,
      vary: 'temperature',
      wantedDoseMin: 20,
      model,
      min: 130,
      max: 190,
    })
    expect(result.feasible && result.stages[0]?.targetTempC === result.stages[1]?.targetTempC).toBe(true)
    expect(result.feasible && result.stages[2]?.targetTempC).toBe(200)
    expect(stages).toEqual(before)
  })
  it('says so when the wanted dose lies in the jump at the base temperature', () => {
    const jumpStages: Stage[] = [
      { kind: 'ramp', targetTempC: 150, durationS: 0 },
      { kind: 'hold', targetTempC: 150, durationS: 2400 },
    ]
    const result = solveStage({
      startTempC,
      stages: jumpStages,
      stageIndex: 1,
      vary: 'temperature',
      wantedDoseMin: 0.05,
      model,
      min: 100,
      max: 200,
    })
    expect(result.feasible).toBe(false)
    if (!result.feasible) {
      expect(result.unattainableMin?.from).toBe(0)
      expectWithin(result.unattainableMin?.to ?? NaN, 40 * 10 ** (-80 / 34), 1e-6)
    }
  })
  it('names what is wrong with the request', () => {
    const request = {
      startTempC,
      stages,
      stageIndex: 3,
      vary: 'minutes' as const,
      wantedDoseMin: 20,
      model,
      min: 1,
      max: 60,
    }
    expectRangeError('stageIndex', () => solveStage({ ...request, stageIndex: 4 }))
    expectRangeError('stageIndex', () =>
      solveStage({
        ...request,
        vary: 'temperature',
        stageIndex: 0,
        stages: [{ kind: 'hold', targetTempC: 30, durationS: 60 }],
      }),
    )
    for (const value of [...notNumbers, 0, -1])
      expectRangeError('wantedDoseMin', () => solveStage({ ...request, wantedDoseMin: value }))
    for (const value of [...notNumbers, -1])
      expectRangeError('min', () => solveStage({ ...request, min: value }))
    for (const value of [...notNumbers, 0.5])
      expectRangeError('max', () => solveStage({ ...request, max: value }))
  })
})
