import { Facts } from '@/components/ui/facts'
import { formatDoseFigure, formatDoseRange, formatNumber, formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { Score } from '@/lib/science/score-types'

/** Half a millimetre is all that the model can claim. */
const showDepth = (depthMm: number) => formatNumber(Math.round(depthMm * 2) / 2, 1)

function Figure({ figure, children }: { figure: string; children: string }) {
  return (
    <>
      <span className="font-[560]">{figure}</span> <span className="text-soft">{children}</span>
    </>
  )
}

/** What the dose means: both intervals, what lies beside it, the two indices, and the depth by the model. */
export function DoseFacts({
  score,
  refTempC,
  unit,
}: {
  score: Score
  refTempC: number
  unit: TemperatureUnit
}) {
  const { dose } = score
  if (dose === null) return null
  const at = `min at ${formatTemp(refTempC, unit)}`
  const facts = [
    {
      name: 'Dose',
      value: (
        <Figure figure={`${formatDoseFigure(dose.doseMin)} ${at}`}>
          {score.verdict === 'incomplete'
            ? 'with what is missing joined straight, so nothing is compared with it.'
            : `from toast start to rest start; the target is ${formatDoseFigure(score.targetDoseMin)}.`}
        </Figure>
      ),
    },
    {
      name: 'Same mount',
      value: (
        <Figure figure={formatDoseRange(dose.sameMount)}>
          {dose.isAssumed
            ? 'is what the same probe, placed again, could have read. Assumed: this room has not measured its own yet. The verdict and comparisons rest on it.'
            : 'is what the same probe, placed again, could have read, by this room’s own measurements. The verdict and comparisons rest on it.'}
        </Figure>
      ),
    },
    {
      name: 'Absolute',
      value:
        dose.absolute === null ? (
          <Figure figure="none">because the probe’s class claims nothing at these temperatures.</Figure>
        ) : (
          <Figure figure={formatDoseRange(dose.absolute)}>
            holds against any other instrument: probe, cold junction, mount and gaps together. A certificate
            says this one.
          </Figure>
        ),
    },
    { name: 'Beside it', value: besideWords(score) },
    {
      name: 'Slow, fast index',
      value: (
        <Figure figure={indexFigure(score)}>
          min. Two firings of one dose can differ in them; illustrative, extrapolated, and neither means deep.
        </Figure>
      ),
    },
    ...depthFact(score),
  ]
  return (
    <section>
      <h2 className="mb-1">The dose and how sure it is</h2>
      <Facts isRuled facts={score.verdict === 'incomplete' ? facts.filter(isOfIncomplete) : facts} />
    </section>
  )
}

/** Without the record there is no interval, no index and no depth to claim. */
function isOfIncomplete(fact: { name: string }): boolean {
  return fact.name === 'Dose' || fact.name === 'Beside it'
}

function besideWords({ bendDoseMin, restDoseMin }: Score): string {
  const bend = bendDoseMin === null ? 'not read' : `${formatDoseFigure(bendDoseMin)} min`
  const rest = restDoseMin === null ? 'not read' : `${formatDoseFigure(restDoseMin)} min`
  return `Before the toast ${bend}, in the rest ${rest}. Neither is scored.`
}

function indexFigure(score: Score): string {
  const pair = (measured: number | null, plan: number) =>
    `${measured === null ? 'none' : formatDoseFigure(measured)} (plan ${formatDoseFigure(plan)})`
  return `${pair(score.slowIndexMin, score.planSlowIndexMin)}, ${pair(score.fastIndexMin, score.planFastIndexMin)}`
}

function depthFact({ toastDepthMm }: Score) {
  if (toastDepthMm === null) return []
  const { low, value, high } = toastDepthMm
  return [
    {
      name: 'Toasted to',
      value: (
        <Figure figure={`${showDepth(value)} mm (${showDepth(low)} to ${showDepth(high)})`}>
          by the model of the stave, to be checked on cut offcuts.
        </Figure>
      ),
    },
  ]
}
