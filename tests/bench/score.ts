import type { Figure } from '@/tests/bench/figure'
import { median } from '@/tests/bench/figure'
import { scoreRecipeOf } from '@/lib/firings/score-input'
import { scoreFiring } from '@/lib/science/score'
import type { ScoreInput } from '@/lib/science/score-types'
import { defaultSiteRules } from '@/lib/science/site-rules'
import { demoRecipes } from '@/simulators/scenarios/demo-recipes'
import { planTempCAt } from '@/lib/science/plan'
import { planOf } from '@/lib/recipes/plan-of'

const perSecond = 5

/** The demo's everyday toast, followed with a slow swing about the plan, at 5 readings a second. */
function followedToast(): ScoreInput {
  const content = demoRecipes[0]?.versions[3]?.content
  if (content === undefined) throw new Error('the demo has no everyday toast')
  const plan = planOf(content, defaultSiteRules.dose)
  const count = plan.totalS * perSecond
  const timeS = Float64Array.from({ length: count }, (_, i) => i / perSecond)
  const about = (swingC: number) =>
    timeS.map(
      (at) => (planTempCAt(plan.points, at) ?? 0) + swingC * Math.sin(at / 70) + 0.3 * Math.sin(at * 1.7),
    )
  const place = content.leadPlace
  return {
    recipe: scoreRecipeOf(content),
    firing: {
      restStartS: plan.totalS,
      stageMarks: plan.stages.slice(1).map((stage) => ({ stageIndex: stage.index, timeS: stage.startS + 9 })),
      preheatMinutes: 12,
      moisturePercent: 19,
      moistureMethod: 'meter',
      bendMinutes: 10.4,
      roomTempC: null,
      specificGravity: null,
      leadSwaps: [],
    },
    lead: { timeS, tempC: about(4), spacingS: 1 / perSecond },
    opposite: { timeS, tempC: about(6), spacingS: 1 / perSecond },
    leadProbe: { type: 'K', iecClass: 1, place, check: null },
    rules: defaultSiteRules,
  }
}

/** The raw work that no score can do without: one power of ten a reading and probe, in the same run. */
function rawPowers(input: ScoreInput): number {
  let sum = 0
  for (const series of [input.lead, input.opposite ?? input.lead]) {
    for (let i = 0; i < series.tempC.length; i += 1) sum += 10 ** (((series.tempC[i] ?? 0) - 200) / 34)
  }
  return sum
}

function timed(work: () => unknown): number {
  const startedAt = performance.now()
  work()
  return performance.now() - startedAt
}

/** Scoring a 45-minute firing at 5 Hz with both probes, against the bare powers of ten of its readings. */
export async function benchScore(): Promise<Figure[]> {
  const input = followedToast()
  const scores: number[] = []
  const raws: number[] = []
  for (let i = 0; i < 60; i += 1) {
    const rawMs = timed(() => rawPowers(input))
    const scoreMs = timed(() => scoreFiring(input))
    if (i < 10) continue
    raws.push(rawMs)
    scores.push(scoreMs)
  }
  return [
    { what: 'score a 45 min firing at 5 Hz, median', value: median(scores), unit: 'ms', target: '≤ 5' },
    {
      what: 'the same ÷ one power of ten a reading',
      value: median(scores) / median(raws),
      unit: '×',
      target: '',
    },
  ]
}
