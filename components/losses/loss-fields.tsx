'use client'

import type { ReactNode } from 'react'
import { NumberField } from '@/components/ui/number-field'
import { TextField } from '@/components/ui/text-field'
import { blisterPlaces, lossKinds, replacedWhens, stavePositionAtMost } from '@/lib/barrels/loss-kinds'
import type { LossDraft } from './loss-draft'

const kindNames = {
  'broken at the pull': 'Broken at the pull',
  blister: 'Blister',
  leak: 'Leak',
  'stave replaced': 'Stave replaced',
} as const

/** Labels by field, for a form's errors. */
export const lossLabels = {
  kind: 'What',
  stavePosition: 'Stave',
  woodLot: 'Wood lot',
  blisterPlace: 'Where',
  blisterSizeMm: 'Size',
  replacedWhen: 'When',
  replacementLot: 'Lot of the new stave',
  replacementToast: 'Its toast',
  words: 'Words',
} as const

/** The fields of a loss: what it is, which stave, and what belongs to its kind. Large enough for gloves where the shell is. */
export function LossFields({
  draft,
  onChange,
  fields,
  canBreak,
}: {
  draft: LossDraft
  onChange: (draft: LossDraft) => void
  fields: Readonly<Record<string, string>>
  /** A stave breaks at the pull of a firing that was bent. */
  canBreak: boolean
}) {
  const change = (part: Partial<LossDraft>) => onChange({ ...draft, ...part })
  return (
    <div className="grid gap-4">
      <Choice
        label="What"
        error={fields['kind']}
        options={lossKinds.filter((kind) => canBreak || kind !== 'broken at the pull')}
        names={kindNames}
        value={draft.kind}
        onValue={(kind) => change({ kind })}
      />
      <div className="grid grid-cols-2 gap-4">
        <NumberField
          name="stavePosition"
          label={`Stave, 1 to ${stavePositionAtMost}`}
          hint="From the bung stave, clockwise seen from the head."
          isOptional={draft.kind === 'leak'}
          value={draft.stavePosition}
          onValueChange={(stavePosition) => change({ stavePosition })}
          min={1}
          max={stavePositionAtMost}
          step={1}
          decimals={0}
          what="the stave’s number"
          error={fields['stavePosition']}
        />
        <TextField
          name="woodLot"
          label="Wood lot"
          maxLength={60}
          autoComplete="off"
          value={draft.woodLot}
          onChange={(event) => change({ woodLot: event.target.value })}
          error={fields['woodLot']}
        />
      </div>
      {draft.kind === 'blister' ? <BlisterFields draft={draft} onChange={change} fields={fields} /> : null}
      {draft.kind === 'stave replaced' ? (
        <ReplacedFields draft={draft} onChange={change} fields={fields} />
      ) : null}
      <TextField
        name="words"
        label="Words"
        isOptional
        maxLength={500}
        autoComplete="off"
        value={draft.words}
        onChange={(event) => change({ words: event.target.value })}
        error={fields['words']}
      />
    </div>
  )
}

type PartProps = {
  draft: LossDraft
  onChange: (part: Partial<LossDraft>) => void
  fields: Readonly<Record<string, string>>
}

function BlisterFields({ draft, onChange, fields }: PartProps) {
  return (
    <div className="grid grid-cols-[1fr_12rem] gap-4">
      <Choice
        label="Where"
        error={fields['blisterPlace']}
        options={blisterPlaces}
        value={draft.blisterPlace}
        onValue={(blisterPlace) => onChange({ blisterPlace })}
      />
      <NumberField
        name="blisterSizeMm"
        label="Size"
        unit="mm"
        value={draft.blisterSizeMm}
        onValueChange={(blisterSizeMm) => onChange({ blisterSizeMm })}
        min={1}
        max={500}
        step={5}
        decimals={0}
        what="its size in mm"
        error={fields['blisterSizeMm']}
      />
    </div>
  )
}

function ReplacedFields({ draft, onChange, fields }: PartProps) {
  const isLate = draft.replacedWhen === 'after the toast'
  return (
    <>
      <div className="grid grid-cols-2 gap-4">
        <Choice
          label="When"
          error={fields['replacedWhen']}
          options={replacedWhens}
          value={draft.replacedWhen}
          onValue={(replacedWhen) => onChange({ replacedWhen })}
        />
        <TextField
          name="replacementLot"
          label="Lot of the new stave"
          maxLength={60}
          autoComplete="off"
          value={draft.replacementLot}
          onChange={(event) => onChange({ replacementLot: event.target.value })}
          error={fields['replacementLot']}
        />
      </div>
      {isLate ? (
        <div className="grid grid-cols-2 gap-4">
          <Choice
            label="Its toast"
            options={['untoasted', 'toasted by itself'] as const}
            value={draft.isUntoasted ? 'untoasted' : 'toasted by itself'}
            onValue={(value) => onChange({ isUntoasted: value === 'untoasted' })}
          />
          {draft.isUntoasted ? (
            <p className="self-end pb-2 text-soft">The certificate will say so.</p>
          ) : (
            <TextField
              name="replacementToast"
              label="Which toast it carries"
              maxLength={80}
              autoComplete="off"
              value={draft.replacementToast}
              onChange={(event) => onChange({ replacementToast: event.target.value })}
              error={fields['replacementToast']}
            />
          )}
        </div>
      ) : null}
    </>
  )
}

/** One of a few, each a press away. */
function Choice<Value extends string>({
  label,
  options,
  names,
  value,
  onValue,
  error,
}: {
  label: ReactNode
  options: readonly Value[]
  names?: Readonly<Record<Value, string>>
  value: Value | null
  onValue: (value: Value) => void
  error?: string
}) {
  return (
    <fieldset className="min-w-0">
      <legend className="mb-1 text-small font-[560]">{label}</legend>
      <div className="flex flex-wrap gap-2">
        {options.map((option) => (
          <button
            key={option}
            type="button"
            aria-pressed={value === option}
            className="control px-4 aria-pressed:border-text! aria-pressed:font-[640]"
            onClick={() => onValue(option)}
          >
            {names?.[option] ?? option}
          </button>
        ))}
      </div>
      {error === undefined ? null : <p className="mt-1 text-small font-[560] text-red">{error}</p>}
    </fieldset>
  )
}
