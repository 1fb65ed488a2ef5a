import type { CheckDraft } from '@/components/probes/check-draft'
import { pressureOf, referenceOf } from '@/components/probes/check-draft'
import { Button } from '@/components/ui/button'
import { NumberField } from '@/components/ui/number-field'
import { Notice } from '@/components/ui/notice'
import { TemperatureField } from '@/components/ui/temperature-field'
import { formatNumber, formatTemp, formatTempDifference } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { altitudeUncertaintyC, checkPoints } from '@/lib/probes/check-points'
import { LEAD_CHECK_SPAN_C } from '@/lib/science/probe-correction'

type Change = (part: Partial<CheckDraft>) => void

/** What to prepare, with its caution, and what the reference stands at. */
export function CheckPrepareStep({
  draft,
  unit,
  isReady,
  onChange,
  onBack,
  onNext,
}: {
  draft: CheckDraft
  unit: TemperatureUnit
  isReady: boolean
  onChange: Change
  onBack: () => void
  onNext: () => void
}) {
  const point = checkPoints.find((one) => one.kind === draft.kind)
  if (point === undefined) return null
  return (
    <form
      method="post"
      noValidate
      onSubmit={(event) => {
        event.preventDefault()
        if (isReady) onNext()
      }}
    >
      <div className="grid gap-x-12 gap-y-6 lg:grid-cols-2">
        <section>
          <h2 className="text-large">{point.title}</h2>
          <ol className="mt-2 grid list-decimal gap-2 pl-6">
            {point.steps.map((step) => (
              <li key={step}>{step}</li>
            ))}
          </ol>
          <Notice tone="attention" className="mt-4">
            {point.caution}
          </Notice>
        </section>
        <section>
          <h2 className="text-large">The reference</h2>
          <div className="mt-2">
            {draft.kind === 'ice' ? (
              <p>Melting ice stands at {formatTemp(0, unit)}, whatever the weather.</p>
            ) : null}
            {draft.kind === 'boiling' ? <Boiling draft={draft} unit={unit} onChange={onChange} /> : null}
            {draft.kind === 'block' ? <Block draft={draft} unit={unit} onChange={onChange} /> : null}
          </div>
        </section>
      </div>
      <div className="mt-6 flex flex-wrap justify-between gap-3">
        <Button className="min-h-14! px-6!" onClick={onBack}>
          Back
        </Button>
        <Button type="submit" kind={isReady ? 'due' : 'main'} className="min-h-14! px-6!" disabled={!isReady}>
          The probe is in: let it settle
        </Button>
      </div>
    </form>
  )
}

function Boiling({ draft, unit, onChange }: { draft: CheckDraft; unit: TemperatureUnit; onChange: Change }) {
  const referenceC = referenceOf(draft)
  const pressureHpa = pressureOf(draft)
  return (
    <>
      <fieldset className="mb-3">
        <legend className="text-soft">Water boils lower the lower the pressure here. From</legend>
        <div className="mt-1 flex flex-wrap gap-x-6 gap-y-1">
          {(['pressure', 'altitude'] as const).map((by) => (
            <label key={by} className="flex min-h-11 cursor-pointer items-center gap-2">
              <input
                type="radio"
                name="by"
                checked={draft.by === by}
                onChange={() => onChange({ by })}
                className="size-5 accent-water"
              />
              {by === 'pressure' ? 'a barometer here' : 'the altitude'}
            </label>
          ))}
        </div>
      </fieldset>
      {draft.by === 'pressure' ? (
        <NumberField
          name="stationPressureHpa"
          label="Station pressure"
          unit="hPa"
          hint="As a barometer reads here, not reduced to sea level as forecasts give it."
          what="a pressure in hPa"
          min={500}
          max={1100}
          decimals={1}
          value={draft.stationPressureHpa}
          onValueChange={(stationPressureHpa) => onChange({ stationPressureHpa })}
        />
      ) : (
        <NumberField
          name="altitudeM"
          label="Altitude of this room"
          unit="m"
          hint={`The day’s weather is not in it: the check is then good to ± ${formatTempDifference(altitudeUncertaintyC, unit, 1)} at best.`}
          what="an altitude in m"
          min={-500}
          max={5000}
          decimals={0}
          value={draft.altitudeM}
          onValueChange={(altitudeM) => onChange({ altitudeM })}
        />
      )}
      <p className="mt-3">
        {referenceC === null || pressureHpa === null
          ? 'Give it, and the boiling point is worked out.'
          : `At ${formatNumber(pressureHpa, 1)} hPa water boils at ${formatTemp(referenceC, unit, 2)}.`}
      </p>
    </>
  )
}

function Block({ draft, unit, onChange }: { draft: CheckDraft; unit: TemperatureUnit; onChange: Change }) {
  const { low, high } = LEAD_CHECK_SPAN_C
  const isOutside =
    draft.referenceTempC !== null && (draft.referenceTempC < low || draft.referenceTempC > high)
  return (
    <div className="grid gap-3">
      <TemperatureField
        name="referenceTempC"
        label="The reference stands at"
        hint="From its certificate, corrected."
        personUnit={unit}
        minC={-50}
        maxC={400}
        decimals={2}
        valueC={draft.referenceTempC}
        onValueChangeC={(referenceTempC) => onChange({ referenceTempC })}
      />
      <TemperatureField
        name="referenceUncertaintyC"
        label="Its uncertainty (k = 2)"
        hint="From its certificate: the half-width, ±."
        kind="difference"
        personUnit={unit}
        minC={0.01}
        maxC={10}
        decimals={2}
        valueC={draft.referenceHalfC}
        onValueChangeC={(referenceHalfC) => onChange({ referenceHalfC })}
      />
      {isOutside ? (
        <p className="text-amber">
          A lead probe’s check at a block counts from {formatTemp(low, unit)} to {formatTemp(high, unit)}: the
          dose is made there.
        </p>
      ) : null}
    </div>
  )
}
