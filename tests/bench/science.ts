import { dynamicTimeWarping } from '@/lib/science/curve'
import type { CurvePoint } from '@/lib/science/heat-dose'
import { createDoseAccumulator, equivalentMinutes } from '@/lib/science/heat-dose'
import type { StageCurve } from '@/lib/science/nearest'
import { createCurveSet, nearestCurves, STAGE_CURVE_POINTS } from '@/lib/science/nearest'
import type { Stage } from '@/lib/science/plan'
import { planCurve, planTempCAt } from '@/lib/science/plan'
import { defaultSiteRules } from '@/lib/science/site-rules'
import { solveStages } from '@/lib/science/solve-stages'
import { createStave, stepStave } from '@/lib/science/stave'
import type { Figure } from '@/tests/bench/figure'
import { median } from '@/tests/bench/figure'

const { dose: model, stave: wood } = defaultSiteRules
const startTempC = 60
const stages: Stage[] = [
  { kind: 'ramp', targetTempC: 140, durationS: 720 },
  { kind: 'ramp', targetTempC: 185, durationS: 480 },
  { kind: 'hold', targetTempC: 185, durationS: 1080 },
  { kind: 'ramp', targetTempC: 200, durationS: 420 },
]
const plan = planCurve(startTempC, stages)
const hz = 5

/** 45 minutes at 5 readings a second, followed with a slow swing and a little noise: 13,500 points. */
function followedPoints(): CurvePoint[] {
  return Array.from({ length: 2700 * hz }, (_, i) => {
    const timeS = i / hz
    const swingC = 4 * Math.sin(timeS / 70) + 0.3 * Math.sin(timeS * 1.7)
    return { timeS, tempC: (planTempCAt(plan, timeS) ?? startTempC) + swingC }
  })
}

/** Median of a task's times, ms; the first runs only warm the compiler. */
function medianMs(work: () => unknown, runs: number): number {
  const times: number[] = []
  for (let run = 0; run < runs + Math.ceil(runs / 4); run += 1) {
    const startedAt = performance.now()
    work()
    if (run >= Math.ceil(runs / 4)) times.push(performance.now() - startedAt)
  }
  return median(times)
}

/** One task with its plain loop, measured in turn in the same run. */
function beside(
  what: string,
  target: string,
  task: () => unknown,
  plain: () => unknown,
  runs: number,
): Figure[] {
  const plainMs = medianMs(plain, runs)
  const taskMs = medianMs(task, runs)
  return [
    { what, value: taskMs, unit: 'ms', target },
    { what: `${what} ÷ plain loop`, value: taskMs / plainMs, unit: '×', target: '' },
  ]
}

function benchDose(): Figure[] {
  const points = followedPoints()
  const midpoints = () => {
    let minutes = 0
    for (let i = 1; i < points.length; i += 1) {
      const from = points[i - 1]
      const to = points[i]
      if (from === undefined || to === undefined) continue
      const middleC = (from.tempC + to.tempC) / 2
      if (middleC < 120) continue
      minutes += ((to.timeS - from.timeS) / 60) * 10 ** ((middleC - 200) / 34)
    }
    return minutes
  }
  const running = () => {
    const dose = createDoseAccumulator(model)
    for (const { timeS, tempC } of points) dose.add(timeS, tempC)
    return dose.minutes
  }
  return [
    ...beside('dose of 13,500 points, median', '≤ 1', () => equivalentMinutes(model, points), midpoints, 80),
    { what: 'the same by the running accumulator', value: medianMs(running, 80), unit: 'ms', target: '' },
  ]
}

/** Warping by a whole table of arrays, as the definition reads. */
function plainWarping(a: readonly number[], b: readonly number[], band: number): number {
  const table = a.map(() => b.map(() => Infinity))
  a.forEach((left, i) => {
    b.forEach((right, j) => {
      if (Math.abs(i - j) > band) return
      const least =
        i === 0 && j === 0
          ? 0
          : Math.min(
              table[i - 1]?.[j] ?? Infinity,
              table[i]?.[j - 1] ?? Infinity,
              table[i - 1]?.[j - 1] ?? Infinity,
            )
      const row = table[i]
      if (row !== undefined) row[j] = least + Math.abs(left - right)
    })
  })
  return table.at(-1)?.at(-1) ?? Infinity
}

function benchWarping(): Figure[] {
  const points = followedPoints()
  const a = Array.from({ length: 900 }, (_, i) => points[15 * i]?.tempC ?? 0)
  const b = a.map((tempC, i) => tempC + 6 * Math.sin(i / 90))
  return beside(
    'warping of 900 × 900, band 10 %, median',
    '≤ 5',
    () => dynamicTimeWarping(a, b, 90),
    () => plainWarping(a, b, 90),
    20,
  )
}

const STAGES = 5
const FIRINGS = 5000

/** Five thousand stage curves about one plan: each firing with an offset, a lag and a swing of its own. */
function manyCurves(): StageCurve[] {
  return Array.from({ length: FIRINGS }, (_, n) => {
    const offC = 9 * Math.sin(n * 12.9898)
    const tiltC = 7 * Math.sin(n * 78.233)
    return Float64Array.from({ length: STAGES * STAGE_CURVE_POINTS }, (_value, i) => {
      const at = i / (STAGES * STAGE_CURVE_POINTS)
      return 60 + 140 * Math.min(1, 1.4 * at) + offC + tiltC * at + 3 * Math.sin(n + i / 9)
    })
  })
}

function benchNearest(): Figure[] {
  const curves = manyCurves()
  const among = createCurveSet(curves, STAGES)
  const wanted = curves[1234] ?? new Float64Array(STAGES * STAGE_CURVE_POINTS)
  const stageWeights = [12, 8, 4, 14, 7]
  const reach = Math.floor(wanted.length / 10)
  const list = [...wanted]
  const all = curves.map((curve) => [...curve])
  const plainAligned = () =>
    curves
      .map((curve, index) => {
        let squares = 0
        for (let i = 0; i < curve.length; i += 1) squares += ((curve[i] ?? 0) - (wanted[i] ?? 0)) ** 2
        return { index, squares }
      })
      .sort((a, b) => a.squares - b.squares)
      .slice(0, 20)
  const plainWarped = () =>
    all
      .map((curve, index) => ({ index, distance: dynamicTimeWarping(list, curve, reach) ?? Infinity }))
      .sort((a, b) => a.distance - b.distance)
      .slice(0, 20)
  const ask = (distance: 'aligned' | 'warped') => () =>
    nearestCurves({ wanted, among, k: 20, stageWeights, distance })
  const compared = (distance: 'aligned' | 'warped') => ask(distance)().comparedCount
  return [
    ...beside('nearest 20 of 5,000 firings, aligned, median', '≤ 300', ask('aligned'), plainAligned, 20),
    { what: 'compared in full of 5,000, aligned', value: compared('aligned'), unit: '', target: '' },
    ...beside('nearest 20 of 5,000 firings, warped, median', '≤ 300', ask('warped'), plainWarped, 8),
    { what: 'compared in full of 5,000, warped', value: compared('warped'), unit: '', target: '' },
    {
      what: 'laying 5,000 stage curves in a set',
      value: medianMs(() => createCurveSet(curves, STAGES), 8),
      unit: 'ms',
      target: '',
    },
  ]
}

const solvedStave = {
  thicknessMm: wood.thicknessMm,
  probeDepthMm: 2,
  moisturePercent: wood.moisturePercent,
  specificGravity: wood.specificGravity,
  roomTempC: wood.roomTempC,
  coldFaceHWPerM2K: wood.coldFaceHWPerM2K,
  toastDepthDoseMin: wood.toastDepthDoseMin,
  probeDepthErrorMm: wood.probeDepthErrorMm,
  diffusivityErrorShare: wood.diffusivityErrorShare,
}

/** Six staves at 5 readings a second through two minutes of the climb, when the wood dries: share of one core. */
function benchStave(): Figure[] {
  const staves = Array.from({ length: 6 }, () => createStave({ ...solvedStave, dose: model, startTempC }))
  const points = followedPoints()
  const walk = (fromS: number, toS: number) => {
    for (let i = fromS * hz; i < toS * hz; i += 1) {
      for (const stave of staves) stepStave(stave, points[i]?.tempC ?? startTempC, 1 / hz)
    }
  }
  walk(0, 480)
  const before = process.cpuUsage()
  walk(480, 600)
  const used = process.cpuUsage(before)
  const share = (used.user + used.system) / 1e6 / 120
  return [{ what: 'six staves stepped at 5 Hz, of one core', value: 100 * share, unit: '%', target: '≤ 1' }]
}

function benchSolve(): Figure[] {
  const solve = () =>
    solveStages({
      startTempC,
      stages,
      moves: [
        { stageIndex: 2, vary: 'minutes', min: 5, max: 40 },
        { stageIndex: 2, vary: 'temperature', min: 150, max: 215 },
      ],
      wanted: { what: 'toast depth', depthMm: 8 },
      model,
      stave: solvedStave,
    })
  return [
    {
      what: 'solve two stages for a toast depth, median',
      value: medianMs(solve, 12),
      unit: 'ms',
      target: '≤ 100',
    },
  ]
}

/** The computations of lib/science, each beside a plain loop in the same run; needs no database. */
export function benchScience(): Figure[] {
  return [...benchDose(), ...benchWarping(), ...benchNearest(), ...benchStave(), ...benchSolve()]
}
