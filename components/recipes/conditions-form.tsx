'use client'

import { Notice } from '@/components/ui/notice'
import { TextArea } from '@/components/ui/text-area'
import { unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { cautionAboveC, hotWoodCaution } from '@/lib/recipes/cautions'
import { leadHeights, leadMountings, pieceKinds, preheatMethods } from '@/lib/recipes/schema'
import type { Draft, DraftErrors } from './editor-draft'
import { InlineChoice, InlineRow, InlineText } from './inline-field'
import { NumberCell } from './number-cell'
import type { Quantity } from './number-cell'

export type ConditionsProps = {
  draft: Draft
  errors: DraftErrors
  unit: TemperatureUnit
  onChange: (changes: Partial<Draft>, field: string) => void
  onEndStep: () => void
}

type Numbered = {
  name: string
  label: string
  value: number | null
  onChange: (value: number | null) => void
  quantity?: Quantity
  decimals?: number
}

function NumberIn({ props, number }: { props: ConditionsProps; number: Numbered }) {
  return (
    <NumberCell
      {...number}
      unit={props.unit}
      error={props.errors[number.name]}
      onBlur={props.onEndStep}
      isInline
    />
  )
}

function errorsOf(props: ConditionsProps, ...names: readonly string[]) {
  return names.map((name) => ({ name, error: props.errors[name] }))
}

/** What is done before the fire: the piece, where it is read, moisture, water, bend. */
export function BeforeTheFire(props: ConditionsProps) {
  const { draft, unit, onChange } = props
  const { preheat, bend, leadPlace } = draft
  const setPreheat = (changes: Partial<Draft['preheat']>, field: string) =>
    onChange({ preheat: { ...preheat, ...changes } }, `preheat.${field}`)
  const setLead = (changes: Partial<Draft['leadPlace']>, field: string) =>
    onChange({ leadPlace: { ...leadPlace, ...changes } }, `leadPlace.${field}`)
  return (
    <section aria-label="Before the fire">
      <h2 className="mb-1 font-[640]">Before the fire</h2>
      <InlineRow name="Piece" errors={errorsOf(props, 'sizeAndShape', 'thicknessMm')}>
        <InlineChoice
          name="pieceKind"
          label="Piece"
          value={draft.pieceKind}
          choices={pieceKinds}
          onChange={(pieceKind) => onChange({ pieceKind }, 'pieceKind')}
        />
        <InlineText
          name="sizeAndShape"
          label="Size and shape"
          value={draft.sizeAndShape}
          error={props.errors['sizeAndShape']}
          onChange={(sizeAndShape) => onChange({ sizeAndShape }, 'sizeAndShape')}
          onBlur={props.onEndStep}
        />
        <NumberIn
          props={props}
          number={{
            name: 'thicknessMm',
            label: 'Thickness, mm',
            value: draft.thicknessMm,
            onChange: (thicknessMm) => onChange({ thicknessMm }, 'thicknessMm'),
          }}
        />
        mm
      </InlineRow>
      <InlineRow
        name="Stave moisture"
        errors={errorsOf(props, 'preheat.moistureMinPercent', 'preheat.moistureMaxPercent')}
      >
        <NumberIn
          props={props}
          number={{
            name: 'preheat.moistureMinPercent',
            label: 'Lowest stave moisture, %',
            value: preheat.moistureMinPercent,
            onChange: (moistureMinPercent) => setPreheat({ moistureMinPercent }, 'moistureMinPercent'),
          }}
        />
        to
        <NumberIn
          props={props}
          number={{
            name: 'preheat.moistureMaxPercent',
            label: 'Highest stave moisture, %',
            value: preheat.moistureMaxPercent,
            onChange: (moistureMaxPercent) => setPreheat({ moistureMaxPercent }, 'moistureMaxPercent'),
          }}
        />
        %
      </InlineRow>
      <InlineRow name="Water" errors={errorsOf(props, 'preheat.waterTempC', 'preheat.minutes')}>
        <NumberIn
          props={props}
          number={{
            name: 'preheat.waterTempC',
            label: 'Water temperature',
            quantity: 'temperature',
            value: preheat.waterTempC,
            onChange: (waterTempC) => setPreheat({ waterTempC }, 'waterTempC'),
          }}
        />
        {unitName(unit)}
        <InlineChoice
          name="preheat.method"
          label="How the water is put on"
          value={preheat.method}
          choices={preheatMethods}
          onChange={(method) => setPreheat({ method }, 'method')}
        />
        <NumberIn
          props={props}
          number={{
            name: 'preheat.minutes',
            label: 'Preheat, minutes',
            value: preheat.minutes,
            onChange: (minutes) => setPreheat({ minutes }, 'minutes'),
          }}
        />
        min
      </InlineRow>
      <InlineRow name="Bend" errors={errorsOf(props, 'bend.minimumMinutes', 'bend.woodLimitC')}>
        at least
        <NumberIn
          props={props}
          number={{
            name: 'bend.minimumMinutes',
            label: 'Bend, least minutes',
            value: bend.minimumMinutes,
            onChange: (minimumMinutes) =>
              onChange({ bend: { ...bend, minimumMinutes } }, 'bend.minimumMinutes'),
          }}
        />
        min, wood below
        <NumberIn
          props={props}
          number={{
            name: 'bend.woodLimitC',
            label: 'Bend, wood below',
            quantity: 'temperature',
            value: bend.woodLimitC,
            onChange: (woodLimitC) => onChange({ bend: { ...bend, woodLimitC } }, 'bend.woodLimitC'),
          }}
        />
        {unitName(unit)}
      </InlineRow>
      <InlineRow name="Read at" errors={errorsOf(props, 'leadPlace.side', 'leadPlace.depthMm')}>
        <InlineChoice
          name="leadPlace.height"
          label="Lead probe, height"
          value={leadPlace.height}
          choices={leadHeights}
          onChange={(height) => setLead({ height }, 'height')}
        />
        side
        <InlineText
          name="leadPlace.side"
          label="Lead probe, side"
          value={leadPlace.side}
          error={props.errors['leadPlace.side']}
          onChange={(side) => setLead({ side }, 'side')}
          onBlur={props.onEndStep}
        />
        <NumberIn
          props={props}
          number={{
            name: 'leadPlace.depthMm',
            label: 'Lead probe, mm from the face',
            value: leadPlace.depthMm,
            onChange: (depthMm) => setLead({ depthMm }, 'depthMm'),
          }}
        />
        mm
        <InlineChoice
          name="leadPlace.mounting"
          label="Lead probe, mounting"
          value={leadPlace.mounting}
          choices={leadMountings}
          onChange={(mounting) => setLead({ mounting }, 'mounting')}
        />
      </InlineRow>
      <InlineRow name="Plan starts at" errors={errorsOf(props, 'planStartTempC')}>
        <NumberIn
          props={props}
          number={{
            name: 'planStartTempC',
            label: 'Plan starts at',
            quantity: 'temperature',
            value: draft.planStartTempC,
            onChange: (planStartTempC) => onChange({ planStartTempC }, 'planStartTempC'),
          }}
        />
        {unitName(unit)}
      </InlineRow>
    </section>
  )
}

/** What must never happen, with the caution in place. */
export function NeverLimits(props: ConditionsProps) {
  const { draft, unit, onChange } = props
  const { limits } = draft
  const set = (changes: Partial<Draft['limits']>, field: string) =>
    onChange({ limits: { ...limits, ...changes } }, `limits.${field}`)
  return (
    <section aria-label="Never">
      <h2 className="mb-1 font-[640]">Never</h2>
      <InlineRow name="Wood above" errors={errorsOf(props, 'limits.woodMaximumC')}>
        <NumberIn
          props={props}
          number={{
            name: 'limits.woodMaximumC',
            label: 'Wood never above',
            quantity: 'temperature',
            value: limits.woodMaximumC,
            onChange: (woodMaximumC) => set({ woodMaximumC }, 'woodMaximumC'),
          }}
        />
        {unitName(unit)} at the lead probe
      </InlineRow>
      {limits.woodMaximumC !== null && limits.woodMaximumC > cautionAboveC ? (
        <Notice tone="attention" className="my-2">
          <strong className="font-[640] text-amber">Caution.</strong> {hotWoodCaution}
        </Notice>
      ) : null}
      <InlineRow name="Climb above" errors={errorsOf(props, 'limits.climbMaximumCPerMin')}>
        <NumberIn
          props={props}
          number={{
            name: 'limits.climbMaximumCPerMin',
            label: 'Climb never above, a minute',
            quantity: 'difference',
            value: limits.climbMaximumCPerMin,
            onChange: (climbMaximumCPerMin) => set({ climbMaximumCPerMin }, 'climbMaximumCPerMin'),
          }}
        />
        {unitName(unit)} a minute
      </InlineRow>
      <InlineRow name="Opposite sides apart by" errors={errorsOf(props, 'limits.spreadC')}>
        <NumberIn
          props={props}
          number={{
            name: 'limits.spreadC',
            label: 'Opposite sides never apart by more than',
            quantity: 'difference',
            value: limits.spreadC,
            onChange: (spreadC) => set({ spreadC }, 'spreadC'),
          }}
        />
        {unitName(unit)}
      </InlineRow>
    </section>
  )
}

/** Dose target, tolerance and rest. `smallestTolerance` is what the site can honestly ask. */
export function TargetFields({
  smallestTolerance,
  isAssumed,
  planDose,
  doseUnit,
  toleranceWords,
  ...props
}: ConditionsProps & {
  smallestTolerance: number
  isAssumed: boolean
  /** The plan's own dose, in words. */
  planDose: string
  /** "min at 200 °C" */
  doseUnit: string
  /** The tolerance as doses: "10.5 to 18.2". */
  toleranceWords: string
}) {
  const { draft, onChange } = props
  return (
    <section aria-label="Target">
      <h2 className="mb-1 font-[640]">Target</h2>
      <InlineRow name="Dose" errors={errorsOf(props, 'doseTargetMinutes')}>
        <select
          aria-label="Where the dose target comes from"
          className="min-h-[30px] cursor-pointer rounded-control border border-transparent bg-transparent px-[5px] hover:border-line"
          value={draft.takesPlanDose ? 'plan' : 'set'}
          onChange={(event) => onChange({ takesPlanDose: event.target.value === 'plan' }, 'takesPlanDose')}
        >
          <option value="plan">the plan’s own</option>
          <option value="set">set to</option>
        </select>
        {draft.takesPlanDose ? (
          <span className="px-[5px]">{planDose}</span>
        ) : (
          <NumberIn
            props={props}
            number={{
              name: 'doseTargetMinutes',
              label: `Dose target, ${doseUnit}`,
              decimals: 2,
              value: draft.doseTargetMinutes,
              onChange: (doseTargetMinutes) => onChange({ doseTargetMinutes }, 'doseTargetMinutes'),
            }}
          />
        )}
        {doseUnit}
      </InlineRow>
      <InlineRow name="Tolerance" errors={errorsOf(props, 'doseToleranceLog10')}>
        ±
        <NumberIn
          props={props}
          number={{
            name: 'doseToleranceLog10',
            label: 'Tolerance, log10 of dose',
            decimals: 3,
            value: draft.doseToleranceLog10,
            onChange: (doseToleranceLog10) => onChange({ doseToleranceLog10 }, 'doseToleranceLog10'),
          }}
        />
        in log10, {toleranceWords}
      </InlineRow>
      <p className="ml-[11.5rem] text-small text-mute">
        This site can ask {smallestTolerance} or more{isAssumed ? ' (assumed, not yet measured)' : ''}.
      </p>
      <InlineRow name="Rest" errors={errorsOf(props, 'restMinutes')}>
        <NumberIn
          props={props}
          number={{
            name: 'restMinutes',
            label: 'Rest, minutes',
            value: draft.restMinutes,
            onChange: (restMinutes) => onChange({ restMinutes }, 'restMinutes'),
          }}
        />
        min
      </InlineRow>
    </section>
  )
}

/** Flavour intent and notes, in words. */
export function WordsFields({ draft, errors, onChange, onEndStep }: ConditionsProps) {
  return (
    <section aria-label="In words" className="space-y-2">
      <TextArea
        name="flavourIntent"
        label="Flavour intent"
        rows={2}
        value={draft.flavourIntent}
        error={errors['flavourIntent']}
        onChange={(event) => onChange({ flavourIntent: event.target.value }, 'flavourIntent')}
        onBlur={onEndStep}
      />
      <TextArea
        name="notes"
        label="Notes"
        isOptional
        rows={2}
        value={draft.notes}
        error={errors['notes']}
        onChange={(event) => onChange({ notes: event.target.value }, 'notes')}
        onBlur={onEndStep}
      />
    </section>
  )
}
