import { NumberField } from '@/components/ui/number-field'
import type { Problem } from '@/components/ui/problem'
import { SelectField } from '@/components/ui/select-field'
import { TextField } from '@/components/ui/text-field'
import { leadHeights, leadMountings } from '@/lib/recipes/lead-places'
import { assayUnitNames, isAssayUnit } from '@/lib/science/formula-units'
import { familyIds, markerFamilies } from '@/lib/science/marker-families'
import type { FitDraft } from './fit-draft'

/** What was fitted, what was assayed, and where the doses were read. */
export function AssayFields({
  draft,
  problem,
  onChange,
}: {
  draft: FitDraft
  problem: Problem | null
  onChange: (changes: Partial<FitDraft>) => void
}) {
  const errorOf = (name: string) => problem?.fields?.[name]
  const family = markerFamilies[draft.family]
  return (
    <>
      <div className="grid grid-cols-[1fr_7rem] gap-3">
        <SelectField
          name="family"
          label="Shape of the response"
          value={draft.family}
          hint={<code>{family.formula}</code>}
          options={familyIds.map((id) => ({ value: id, label: markerFamilies[id].name }))}
          onChange={(event) => {
            const id = familyIds.find((one) => one === event.target.value)
            if (id !== undefined) onChange({ family: id })
          }}
          error={errorOf('family')}
        />
        <SelectField
          name="unit"
          label="Results in"
          value={draft.unit}
          options={assayUnitNames.map((name) => ({ value: name, label: name }))}
          onChange={(event) => {
            if (isAssayUnit(event.target.value)) onChange({ unit: event.target.value })
          }}
          error={errorOf('unit')}
        />
      </div>
      <fieldset className="grid grid-cols-2 gap-3">
        <legend className="mb-1 font-[640]">What was assayed</legend>
        <TextField
          name="matrix"
          label="Matrix"
          placeholder="Toasted oak"
          value={draft.matrix}
          onChange={(event) => onChange({ matrix: event.target.value })}
          error={errorOf('matrix')}
        />
        <TextField
          name="extraction"
          label="Extraction"
          placeholder="Model wine, 10 g/L, 14 days"
          value={draft.extraction}
          onChange={(event) => onChange({ extraction: event.target.value })}
          error={errorOf('extraction')}
        />
        <TextField
          name="samplePosition"
          label="Sample taken at"
          placeholder="Bilge, stave 7"
          value={draft.samplePosition}
          onChange={(event) => onChange({ samplePosition: event.target.value })}
          error={errorOf('samplePosition')}
        />
        <div className="grid grid-cols-2 gap-3">
          <NumberField
            name="sampleFromMm"
            label="From the face"
            unit="mm"
            value={draft.sampleFromMm}
            onValueChange={(sampleFromMm) => onChange({ sampleFromMm })}
            error={errorOf('sampleFromMm')}
          />
          <NumberField
            name="sampleToMm"
            label="Down to"
            unit="mm"
            value={draft.sampleToMm}
            onValueChange={(sampleToMm) => onChange({ sampleToMm })}
            error={errorOf('sampleToMm')}
          />
        </div>
      </fieldset>
      <PlaceFields draft={draft} errorOf={errorOf} onChange={onChange} />
    </>
  )
}

function PlaceFields({
  draft: { place },
  errorOf,
  onChange,
}: {
  draft: FitDraft
  errorOf: (name: string) => string | undefined
  onChange: (changes: Partial<FitDraft>) => void
}) {
  return (
    <fieldset className="grid grid-cols-4 gap-3">
      <legend className="mb-1 font-[640]">Where the doses were read</legend>
      <SelectField
        name="place.height"
        label="Height"
        value={place.height}
        options={leadHeights.map((height) => ({ value: height, label: height }))}
        onChange={(event) => {
          const height = leadHeights.find((one) => one === event.target.value)
          if (height !== undefined) onChange({ place: { ...place, height } })
        }}
        error={errorOf('place.height')}
      />
      <TextField
        name="place.side"
        label="Side"
        value={place.side}
        onChange={(event) => onChange({ place: { ...place, side: event.target.value } })}
        error={errorOf('place.side')}
      />
      <NumberField
        name="place.depthMm"
        label="Depth"
        unit="mm"
        value={place.depthMm}
        onValueChange={(depthMm) => onChange({ place: { ...place, depthMm } })}
        error={errorOf('place.depthMm')}
      />
      <SelectField
        name="place.mounting"
        label="Mounting"
        value={place.mounting}
        options={leadMountings.map((mounting) => ({ value: mounting, label: mounting }))}
        onChange={(event) => {
          const mounting = leadMountings.find((one) => one === event.target.value)
          if (mounting !== undefined) onChange({ place: { ...place, mounting } })
        }}
        error={errorOf('place.mounting')}
      />
    </fieldset>
  )
}
