import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { dynamicTimeWarping } from '../../lib/science/curve'
import type { NearestRequest, StageCurve } from '../../lib/science/nearest'
import { createCurveSet, nearestCurves, stageCurve } from '../../lib/science/nearest'
import { expectRangeError, expectWithin, notNumbers, propertyRun } from './published-checks'

const stages = 3
const pointsPerStage = 11
const length = stages * pointsPerStage
const weights = [12, 8, 25]

/** Straight from the definitions, all candidates, no bound. */
function byBruteForce(request: NearestRequest, curves: readonly StageCurve[]) {
  const band = request.bandPoints ?? Math.floor(request.wanted.length / 10)
  const all = curves.map((curve, index) => {
    if (request.distance === 'warped') {
      const distanceC = (dynamicTimeWarping([...request.wanted], [...curve], band) ?? NaN) / curve.length
      return { index, distanceC }
    }
    const weightSum = request.stageWeights.reduce((sum, weight) => sum + weight, 0)
    const squares = request.stageWeights.map((weight, stage) => {
      const from = stage * pointsPerStage
      const part = curve.subarray(from, from + pointsPerStage)
      const sum = part.reduce((s, tempC, i) => s + (tempC - (request.wanted[from + i] ?? NaN)) ** 2, 0)
      return (weight / weightSum) * (sum / pointsPerStage)
    })
    return { index, distanceC: Math.sqrt(squares.reduce((sum, square) => sum + square, 0)) }
  })
  return all.sort((a, b) => a.distanceC - b.distanceC || a.index - b.index)
}

/** Curves of whole degrees, some of them equal, so that ties and near ties come up. */
const curve = fc
  .array(fc.integer({ min: 0, max: 6 }), { minLength: length, maxLength: length })
  .map((values) => Float64Array.from(values))

/** Curves like firings: a plan, shifted and tilted a little, with noise. */
const firingLike = fc
  .record({
    shiftC: fc.double({ min: -20, max: 20, noNaN: true }),
    tiltC: fc.double({ min: -15, max: 15, noNaN: true }),
    noise: fc.array(fc.double({ min: -3, max: 3, noNaN: true }), { minLength: length, maxLength: length }),
  })
  .map(({ shiftC, tiltC, noise }) =>
    Float64Array.from(
      noise,
      (value, i) => 60 + 140 * Math.min(1, i / 22) + shiftC + (tiltC * i) / length + value,
    ),
  )

describe('the nearest of many curves', () => {
  for (const distance of ['aligned', 'warped'] as const) {
    for (const [name, anyCurve] of [
      ['whole degrees with ties', curve],
      ['curves like firings', firingLike],
    ] as const) {
      describe(`${distance}, ${name}`, () => {
        it('law: are those that comparing all of them gives', () => {
          fc.assert(
            fc.property(
              anyCurve,
              fc.array(anyCurve, { minLength: 1, maxLength: 25 }),
              fc.integer({ min: 1, max: 8 }),
              fc.integer({ min: 0, max: 6 }),
              (wanted, curves, k, bandPoints) => {
                const among = createCurveSet(curves, stages, pointsPerStage)
                const request = { wanted, among, k, stageWeights: weights, distance, bandPoints }
                const { nearest, comparedCount } = nearestCurves(request)
                const wantedAnswer = byBruteForce(request, curves)
                expect(comparedCount).toBeLessThanOrEqual(curves.length)
                expect(nearest).toHaveLength(Math.min(k, curves.length))
                nearest.forEach((found, i) => {
                  expectWithin(found.distanceC, wantedAnswer[i]?.distanceC ?? NaN, 1e-9)
                })
                // Places agree wherever the distances are told apart by more than the rounding of two ways to add.
                const isClear = nearest.every((_, i) => {
                  const nextC = wantedAnswer[i + 1]?.distanceC ?? Infinity
                  return nextC - (wantedAnswer[i]?.distanceC ?? NaN) > 1e-9
                })
                if (!isClear) return
                const places = wantedAnswer.slice(0, k).map(({ index }) => index)
                expect(nearest.map((found) => found.index)).toEqual(places)
              },
            ),
            propertyRun,
          )
        })
      })
    }
  }

  it('a curve is nearest to itself, and of equal ones the earlier comes first', () => {
    const plan = Float64Array.from({ length }, (_, i) => 60 + 4 * i)
    const off = plan.map((tempC) => tempC + 1)
    const among = createCurveSet([off, plan, off, plan], stages, pointsPerStage)
    for (const distance of ['aligned', 'warped'] as const) {
      const { nearest } = nearestCurves({ wanted: plan, among, k: 4, stageWeights: weights, distance })
      expect(nearest.map((found) => found.index)).toEqual([1, 3, 0, 2])
      expect(nearest[0]?.distanceC).toBe(0)
    }
  })

  it('says which stage differs, by how much, and weighs it as asked', () => {
    const wanted = new Float64Array(length).fill(150)
    const other = wanted.map((tempC, i) => (i >= 2 * pointsPerStage ? tempC - 6 : tempC))
    const among = createCurveSet([other], stages, pointsPerStage)
    const { nearest } = nearestCurves({ wanted, among, k: 1, stageWeights: weights })
    expect(nearest[0]?.stages).toEqual([
      { rmsC: 0, meanC: 0, largestC: 0 },
      { rmsC: 0, meanC: 0, largestC: 0 },
      { rmsC: 6, meanC: -6, largestC: -6 },
    ])
    // 25 of 45 minutes are 6 °C off: √(25/45)·6.
    expectWithin(nearest[0]?.distanceC ?? NaN, Math.sqrt(25 / 45) * 6, 1e-12)
    const blind = nearestCurves({ wanted, among, k: 1, stageWeights: [1, 1, 0] })
    expect(blind.nearest[0]?.distanceC).toBe(0)
  })

  it('a climb that came later inside its stage is nearer when warped than when aligned', () => {
    const climb = (late: number) => Float64Array.from({ length }, (_, i) => (i < 15 + late ? 100 : 160))
    const among = createCurveSet([climb(2)], stages, pointsPerStage)
    const ask = (distance: 'aligned' | 'warped') =>
      nearestCurves({ wanted: climb(0), among, k: 1, stageWeights: weights, distance }).nearest[0]?.distanceC
    expect(ask('warped')).toBe(0)
    expect(ask('aligned')).toBeGreaterThan(5)
  })

  it('rules out most of a large set without comparing it', () => {
    const curves = Array.from({ length: 2000 }, (_, n) =>
      Float64Array.from({ length }, (_, i) => 60 + 4 * i + 25 * Math.sin(n * 12.9898) + 3 * Math.sin(n + i)),
    )
    const among = createCurveSet(curves, stages, pointsPerStage)
    const wanted = curves[7] ?? new Float64Array(length)
    for (const distance of ['aligned', 'warped'] as const) {
      const { comparedCount, nearest } = nearestCurves({
        wanted,
        among,
        k: 20,
        stageWeights: weights,
        distance,
      })
      expect(nearest[0]?.index).toBe(7)
      expect(comparedCount).toBeLessThan(curves.length / 3)
    }
  })

  it('names what does not fit', () => {
    const among = createCurveSet([new Float64Array(length)], stages, pointsPerStage)
    const request = { wanted: new Float64Array(length), among, k: 1, stageWeights: weights }
    expectRangeError('wanted', () => nearestCurves({ ...request, wanted: new Float64Array(5) }))
    expectRangeError('stageWeights', () => nearestCurves({ ...request, stageWeights: [1] }))
    expectRangeError('stageWeights', () => nearestCurves({ ...request, stageWeights: [0, 0, 0] }))
    expectRangeError('stageWeights[1]', () => nearestCurves({ ...request, stageWeights: [1, -1, 1] }))
    expectRangeError('k', () => nearestCurves({ ...request, k: 0 }))
    expectRangeError('bandPoints', () => nearestCurves({ ...request, bandPoints: 1.5 }))
    expectRangeError('curves[0]', () => createCurveSet([new Float64Array(3)], stages, pointsPerStage))
    for (const value of notNumbers) {
      expectRangeError('curves[0][0]', () =>
        createCurveSet([new Float64Array(length).fill(value)], stages, 11),
      )
    }
  })
})

describe('a stage curve', () => {
  const points = { timeS: [0, 600, 1200, 3000], tempC: [60, 120, 120, 210] }

  it('takes the middle of each part of each stage as it was fired', () => {
    expect(stageCurve(points, [0, 600, 1200], 2)).toEqual(Float64Array.from([75, 105, 120, 120]))
    expect(stageCurve(points, [600, 600, 1200], 1)).toEqual(Float64Array.from([120, 120]))
  })

  it('does not depend on how long a stage took', () => {
    const slow = { timeS: points.timeS.map((timeS) => timeS * 1.3), tempC: points.tempC }
    const usual = stageCurve(points, [0, 600, 1200, 3000], 8)
    const stretched = stageCurve(slow, [0, 780, 1560, 3900], 8)
    usual?.forEach((tempC, i) => expectWithin(stretched?.[i] ?? NaN, tempC, 1e-9))
  })

  it('is nothing when a needed temperature is not there', () => {
    expect(stageCurve(points, [0, 600, 3600])).toBeNull()
    expect(stageCurve({ ...points, tempC: [60, NaN, 120, 210] }, [0, 600])).toBeNull()
  })

  it('names boundaries that are none', () => {
    expectRangeError('boundariesS', () => stageCurve(points, [0]))
    expectRangeError('boundariesS[1]', () => stageCurve(points, [600, 0]))
    expectRangeError('pointsPerStage', () => stageCurve(points, [0, 600], 0))
  })
})
