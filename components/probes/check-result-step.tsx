import type { CheckDraft, CheckKind, CheckResult } from '@/components/probes/check-draft'
import { effectAt } from '@/components/probes/check-draft'
import { Button } from '@/components/ui/button'
import { Facts } from '@/components/ui/facts'
import { FormError } from '@/components/ui/form-error'
import type { Problem } from '@/components/ui/problem'
import { TextField } from '@/components/ui/text-field'
import { formatNumber, formatSigned, formatTemp, toShownDifference, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { ProbeCheckDto } from '@/lib/probes/schema'
import { shownSentence } from '@/lib/recipes/shown-sentence'

/** Where the dose is made: what the check does to a reading there. */
const shownAtC = 200

/** What the check says, how good it is, what it changes, and when it is due again. */
export function CheckResultStep({
  draft,
  result,
  checks,
  nowMs,
  months,
  unit,
  isBusy,
  problem,
  onDueOn,
  onBack,
  onRecord,
}: {
  draft: CheckDraft & { kind: CheckKind }
  result: CheckResult
  checks: readonly ProbeCheckDto[]
  nowMs: number
  months: number
  unit: TemperatureUnit
  isBusy: boolean
  problem: Problem | null
  onDueOn: (dueOn: string) => void
  onBack: () => void
  onRecord: () => void
}) {
  const half = (differenceC: number) =>
    `${formatNumber(toShownDifference(differenceC, unit), 2)} ${unitName(unit)}`
  return (
    <form
      method="post"
      noValidate
      onSubmit={(event) => {
        event.preventDefault()
        onRecord()
      }}
    >
      <FormError problem={shown(problem, unit)} />
      <div className="grid gap-x-12 gap-y-6 lg:grid-cols-2">
        <section>
          <h2 className="text-large">Correction</h2>
          <p className="text-[62px] leading-none font-[640]">
            {formatSigned(toShownDifference(result.correctionC, unit), 2)}
            <span className="text-title font-[380]">
              {' '}
              {unitName(unit)} ± {formatNumber(toShownDifference(result.wholeC, unit), 2)}
            </span>
          </p>
          <div className="mt-3">
            <Facts
              isRuled
              facts={[
                { name: 'Reference', value: formatTemp(result.referenceTempC, unit, 2) },
                { name: 'The probe read', value: formatTemp(result.measuredTempC, unit, 2) },
                { name: 'How', value: howWords(draft) },
                {
                  name: 'Uncertainty, k = 2',
                  value: `${half(result.wholeC)}: reference, scatter and resolution as squares`,
                },
              ]}
            />
          </div>
        </section>
        <section>
          <h2 className="text-large">What it changes</h2>
          <Effect draft={draft} result={result} checks={checks} nowMs={nowMs} unit={unit} />
          <TextField
            name="dueAt"
            type="date"
            label="Due again on"
            className="mt-5 max-w-64"
            hint={`Left empty: ${formatNumber(months, months % 1 === 0 ? 0 : 1)} months from today, the site’s usual time.`}
            value={draft.dueOn}
            error={problem?.fields?.['dueAt']}
            onChange={(event) => onDueOn(event.target.value)}
          />
        </section>
      </div>
      <div className="mt-6 flex flex-wrap justify-between gap-3">
        <Button className="min-h-14! px-6!" onClick={onBack}>
          Back
        </Button>
        <Button type="submit" kind="due" className="min-h-14! px-6!" isBusy={isBusy}>
          {isBusy ? 'Recording' : 'Record the check'}
        </Button>
      </div>
    </form>
  )
}

function howWords({ taken }: CheckDraft): string {
  return taken?.way === 'live' ? 'the mean of its own settled readings' : 'read by eye'
}

function Effect({
  draft,
  result,
  checks,
  nowMs,
  unit,
}: {
  draft: CheckDraft & { kind: CheckKind }
  result: CheckResult
  checks: readonly ProbeCheckDto[]
  nowMs: number
  unit: TemperatureUnit
}) {
  const { beforeC, afterC, halfC } = effectAt(shownAtC, checks, draft.kind, result, nowMs)
  const reading = formatTemp(shownAtC, unit, 1)
  const isSame = Math.abs(afterC - beforeC) < 0.005
  return (
    <div className="mt-1 text-large">
      <p>
        {isSame
          ? `A reading of ${reading} stays ${formatTemp(afterC, unit, 1)}.`
          : `A reading of ${reading} was taken as ${formatTemp(beforeC, unit, 1)}; from now on it is ${formatTemp(afterC, unit, 1)}.`}
      </p>
      <p className="mt-1 text-soft">
        {halfC === null
          ? 'That lies beyond the checked points: only the probe’s class says how good it is there.'
          : `Good to ± ${formatNumber(toShownDifference(halfC, unit), 2)} ${unitName(unit)} (k = 2).`}{' '}
        Firings that have begun keep the correction that they began with.
      </p>
    </div>
  )
}

/** The server's sentences say °C. */
function shown(problem: Problem | null, unit: TemperatureUnit): Problem | null {
  if (problem === null || problem.fields === undefined) return problem
  const fields = Object.entries(problem.fields).map(([name, sentence]) => [
    name,
    shownSentence(name, sentence, unit),
  ])
  return { ...problem, fields: Object.fromEntries(fields) }
}
