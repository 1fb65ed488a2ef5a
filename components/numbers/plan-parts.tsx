import { Constants, Formula, Limit, Part, Worked } from '@/components/numbers/part'
import { formatDoseFigure, formatNumber, formatTemp, formatTempDifference } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { forecastDose } from '@/lib/science/forecast'
import type { Stage } from '@/lib/science/plan'
import { planCurve, planDose, solveStage } from '@/lib/science/plan'
import { bandHalfWidthC } from '@/lib/science/plan-band'
import { sameMountHalfLog10 } from '@/lib/science/same-mount'
import { ruleset1 } from '@/lib/science/score-ruleset'
import type { SiteRules } from '@/lib/science/site-rules'

type Props = { rules: SiteRules; unit: TemperatureUnit }

const startTempC = 60
const stages: readonly Stage[] = [
  { kind: 'ramp', targetTempC: 190, durationS: 900 },
  { kind: 'hold', targetTempC: 190, durationS: 1200 },
]

export function Plan({ rules, unit }: Props) {
  const planned = planDose(rules.dose, startTempC, stages)
  const wanted = planned * 1.25
  const solved = solveStage({
    startTempC,
    stages,
    stageIndex: 1,
    vary: 'minutes',
    wantedDoseMin: wanted,
    model: rules.dose,
    min: 1,
    max: 60,
  })
  const ramp = { kind: 'ramp' as const, startTempC, endTempC: 190, durationS: 900, bandC: 6 }
  return (
    <Part id="plan" title="The plan, its band, and solving">
      <p>
        A recipe’s plan goes from stage to stage: a ramp is a straight line over its minutes, a hold is flat.
        Its dose is exact. Solving asks backwards: how many minutes, or how many degrees, give the wanted
        dose; when none within the limits does, the range that can be had is said.
      </p>
      <Worked>
        From {formatTemp(startTempC, unit)} in 15 min to {formatTemp(190, unit)}, then held 20 min:{' '}
        {formatDoseFigure(planned)} min at {formatTemp(rules.dose.refTempC, unit)}.{' '}
        {solved.feasible
          ? `A quarter more, ${formatDoseFigure(wanted)}, needs a hold of ${formatNumber(solved.value, 1)} min.`
          : `A quarter more cannot be had: ${formatDoseFigure(solved.attainableMin)} to ${formatDoseFigure(solved.attainableMax)} can.`}{' '}
        Its ramp’s band, asked as ±{formatTempDifference(6, unit)}, is ±
        {formatTempDifference(bandHalfWidthC(ramp), unit, 1)}: the wider of that and {ruleset1.rampBandMin}{' '}
        min early or late.
      </Worked>
      <Limit>Root: R. P. Brent’s method (1973), to the last digits of the machine’s numbers.</Limit>
    </Part>
  )
}

export function Climb({ rules: { limits }, unit }: Props) {
  return (
    <Part id="climb" title="Climb rate">
      <p>
        A line of degree 2 is laid through the last 30 s of readings by least squares, and its slope at the
        newest one is the climb. At the live edge there is nothing after the newest reading, so the window
        looks back only and the figure is a little less sure than later.
      </p>
      <Formula>
        Savitzky-Golay, window 30 s, degree 2, first derivative at the newest point, per minute
      </Formula>
      <Limit>
        The climb limit is judged over {formatNumber(limits.climbWindowS)} s, and shown in{' '}
        {unit === 'F' ? '°F' : '°C'} a minute. Savitzky and Golay, Analytical Chemistry 36 (1964) 1627.
      </Limit>
    </Part>
  )
}

/** Ten minutes into the hold of the worked plan, 5 °C under it. */
function workedForecast(rules: SiteRules) {
  const nowS = 1500
  const plan = planCurve(startTempC, stages)
  const planRemaining = [
    { timeS: 0, tempC: 190 },
    { timeS: 2100 - nowS, tempC: 190 },
  ]
  const soFar = planDose(rules.dose, startTempC, [
    ...stages.slice(0, 1),
    { kind: 'hold' as const, targetTempC: 190, durationS: nowS - 900 },
  ])
  return forecastDose({
    doseMin: soFar * 0.8,
    tempC: (plan[1]?.tempC ?? 190) - 5,
    climbCPerMin: 0,
    planRemaining,
    targetDoseMin: planDose(rules.dose, startTempC, stages),
    toleranceLog10: rules.doseToleranceLog10,
    woodMaxTempC: 230,
    climbMaxCPerMin: 12,
    intervalLog10: sameMountHalfLog10(rules),
    model: rules.dose,
    rules: rules.forecast,
  })
}

export function Forecast({ rules, unit }: Props) {
  const { plan, held, minutesToPlannedEnd, advice } = workedForecast(rules)
  const minutes = (value: number | null) => (value === null ? 'not reached' : `${formatNumber(value, 1)} min`)
  return (
    <Part id="forecast" title="Forecast and advice">
      <p>
        From the dose so far, three futures are followed: the temperature held; the present climb kept up to
        the wood’s maximum; the plan resumed. Each gives the minutes to the target dose, with the range that
        the same-mount interval makes of it. One piece of advice is made from the third line alone, so that it
        cannot contradict it. It is shown only while the reading is fresh.
      </p>
      <Worked>
        Ten minutes into the hold above, {formatTempDifference(5, unit)} under the plan and a fifth behind in
        dose: the plan resumed reaches the target in {minutes(plan.minutesToTarget)}
        {plan.earliestMinutes === null || plan.latestMinutes === null
          ? ''
          : ` (${formatNumber(plan.earliestMinutes, 1)} to ${formatNumber(plan.latestMinutes, 1)})`}
        ; held as it is, in {minutes(held.minutesToTarget)}. The plan has{' '}
        {formatNumber(minutesToPlannedEnd, 1)} min left. “{advice.sentence}”
      </Worked>
      <Constants
        of="forecast"
        rows={[
          {
            name: 'Back on the plan within',
            value: `${formatNumber(rules.forecast.rejoinMin)} min`,
            source: 'this site’s settings; slower when the climb limit asks it',
          },
          {
            name: 'Furthest target foreseen',
            value: `${formatNumber(rules.forecast.horizonMin)} min`,
            source: 'this site’s settings',
          },
        ]}
      />
      <Limit>Advice, never control: Emberstave does not touch the fire.</Limit>
    </Part>
  )
}
