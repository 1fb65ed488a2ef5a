import { NumbersLink } from '@/components/numbers/numbers-link'
import { Table } from '@/components/ui/table'
import type { ShortStep } from '@/lib/firings/short-steps'
import { shortStepWords } from '@/lib/firings/short-steps'
import { formatNumber, formatSigned, formatTempDifference } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { describeBrokenLimit, describeTerm, showMinutes } from '@/lib/science/score-sentences'
import type { Score, ScoreTerm } from '@/lib/science/score-types'

/** "13", "9.8": points to one decimal place, so that what is shown adds up. */
export function showPoints(points: number): string {
  return formatNumber(points, Number.isInteger(points) ? 0 : 1)
}

/** A term's measure in its own unit. */
export function showMeasured(term: ScoreTerm, unit: TemperatureUnit): string {
  if (!term.isMeasured) return 'not scored'
  if (term.measured === null) return 'no dose'
  const { measured, detail } = term
  switch (term.unit) {
    case 'log10':
      return `${formatSigned(measured, 2)} log`
    case 'bands':
      return `${formatNumber(measured, 2)} bands off`
    case 'differenceC':
      return formatTempDifference(measured, unit, 1)
    case 'minutes':
      return `${detail ?? ''} ${showMinutes(measured)}`.trim()
    case 'percentMoisture':
      return `moisture ${formatNumber(measured, 1)} %`
    case 'percent': {
      if (term.key !== 'stageLengths') return `${formatNumber(measured)} %`
      if (Math.abs(measured) < 0.5) return 'as planned'
      return `${detail ?? ''} ${formatNumber(Math.abs(measured))} % ${measured > 0 ? 'long' : 'short'}`
    }
  }
}

/** What loses nothing, in the same unit. */
function showAllowed(term: ScoreTerm, unit: TemperatureUnit): string {
  if (term.allowed === null) return ''
  switch (term.unit) {
    case 'log10':
      return `±${formatNumber(term.allowed, 2)}`
    case 'bands':
      return formatNumber(term.allowed)
    case 'differenceC':
      return formatTempDifference(term.allowed, unit)
    case 'minutes':
      return showMinutes(term.allowed)
    case 'percentMoisture':
      return `${formatNumber(term.allowed, 1)} %`
    case 'percent':
      return `${formatNumber(term.allowed)} %`
  }
}

function showTermPoints(term: ScoreTerm): string {
  if (term.pointsLost === null) return 'left out'
  return `${showPoints(term.pointsOf - term.pointsLost)} of ${term.pointsOf}`
}

/** The reasons for what a term measured: words beside the points, none of which they change. */
function reasonsBeside(term: ScoreTerm, steps: readonly ShortStep[]): string {
  const isOfTerm = ({ step }: ShortStep) =>
    term.key === 'preheatAndBend'
      ? step === 'preheat' || step === 'bend'
      : term.key === 'stageLengths' && step === 'stage'
  return steps
    .filter((step) => isOfTerm(step) && step.reason !== null)
    .map((step) => `${shortStepWords(step)}; the reason given: ${step.reason}.`)
    .join(' ')
}

/** Why so many points: term by term, with a sentence for each that lost some, and all of them in words below. */
export function TermTable({
  score,
  refTempC,
  unit,
  shortSteps = [],
}: {
  score: Score
  refTempC: number
  unit: TemperatureUnit
  /** Their reasons are said beside the terms that measured them. */
  shortSteps?: readonly ShortStep[]
}) {
  const context = { doseMin: score.dose?.doseMin ?? null, targetDoseMin: score.targetDoseMin, refTempC }
  const heading = score.points === null ? 'Why it is incomplete' : `Why ${showPoints(score.points)} points`
  return (
    <section>
      <h2 className="mb-1">{heading}</h2>
      {score.incompleteReasons.map((reason) => (
        <p key={reason} className="border-b border-line py-[5.5px] text-amber">
          {reason}
        </p>
      ))}
      {score.limitsBroken.map((limit) => (
        <p key={limit.limit} className="border-b border-line py-[5.5px] font-[560] text-red">
          {describeBrokenLimit(limit, unit)}
        </p>
      ))}
      {score.points === null ? null : (
        <Table
          caption={heading}
          rows={score.terms}
          rowKey={(term) => term.key}
          columns={[
            { key: 'term', head: 'Term', isRowHead: true, cell: (term) => term.name },
            { key: 'measured', head: 'Measured', cell: (term) => showMeasured(term, unit) },
            { key: 'allowed', head: 'Allowed', cell: (term) => showAllowed(term, unit) },
            { key: 'points', head: 'Points', isNumeric: true, cell: showTermPoints },
          ]}
        />
      )}
      <p className="mt-2 text-mute">
        Ruleset {score.ruleset}. <NumbersLink />
      </p>
      {score.points === null ? null : (
        <details className="mt-1" open={score.terms.some((term) => term.pointsLost !== 0)}>
          <summary className="cursor-pointer text-soft">Each term in words</summary>
          <ul className="mt-1 space-y-1 text-small text-soft">
            {score.terms.map((term) => (
              <li key={term.key}>
                {describeTerm(term, context, unit)} {reasonsBeside(term, shortSteps)}
              </li>
            ))}
          </ul>
        </details>
      )}
    </section>
  )
}
