'use client'

import { Field } from '@/components/ui/field'
import { SelectField } from '@/components/ui/select-field'
import { TextField } from '@/components/ui/text-field'
import type { DateOrder, ExposureKind, FileColumns } from '@/lib/conditions/schema'

export type FileDraft = {
  kind: ExposureKind
  subject: string
  fileName: string
  text: string
  dateOrder: DateOrder
  zone: 'site' | 'UTC'
  temperatureUnit: 'C' | 'F'
  columns: FileColumns
}

export const fileLabels = {
  kind: 'What',
  subject: 'Worn by, or where',
  text: 'File',
  fileName: 'File',
  dateOrder: 'Dates',
  zone: 'Times',
  temperatureUnit: 'Temperatures',
  'columns.time': 'Column of times',
  'columns.value': 'Column of readings',
  skipsFaulty: 'Lines that cannot be read',
} as const

const kinds = [
  { value: 'carbon monoxide', label: 'Carbon monoxide, ppm' },
  { value: 'heat', label: 'Heat, WBGT' },
]
const orders = [
  { value: 'year first', label: '2027-03-14' },
  { value: 'day first', label: '14.03.2027 or 14/03/2027' },
  { value: 'month first', label: '03/14/2027' },
]
const units = [
  { value: 'C', label: '°C' },
  { value: 'F', label: '°F' },
]

/** What a meter's file is, and how its lines are read. */
export function ExposureFileFields({
  draft,
  onChange,
  fields,
  zone,
}: {
  draft: FileDraft
  onChange: (part: Partial<FileDraft>) => void
  fields: Readonly<Record<string, string>>
  zone: string
}) {
  const take = async (file: File | undefined) => {
    if (file !== undefined) onChange({ fileName: file.name.slice(0, 120), text: await file.text() })
  }
  return (
    <>
      <Field name="file" label={fileLabels.text} error={fields['text'] ?? fields['fileName']}>
        {(wiring) => (
          <input
            {...wiring}
            type="file"
            accept=".csv,.txt,.tsv,text/csv,text/plain"
            className="control w-full px-[10px] py-[5px]"
            onChange={(event) => void take(event.target.files?.[0])}
          />
        )}
      </Field>
      <div className="grid grid-cols-2 gap-4">
        <SelectField
          name="kind"
          label={fileLabels.kind}
          options={kinds}
          value={draft.kind}
          onChange={(event) => onChange({ kind: event.target.value === 'heat' ? 'heat' : 'carbon monoxide' })}
        />
        <TextField
          name="subject"
          label={fileLabels.subject}
          maxLength={60}
          value={draft.subject}
          onChange={(event) => onChange({ subject: event.target.value })}
          error={fields['subject']}
        />
        <SelectField
          name="dateOrder"
          label={fileLabels.dateOrder}
          options={orders}
          value={draft.dateOrder}
          onChange={(event) => onChange({ dateOrder: orderOf(event.target.value) })}
        />
        <SelectField
          name="zone"
          label={fileLabels.zone}
          hint="Of times that say no zone."
          options={[
            { value: 'site', label: zone },
            { value: 'UTC', label: 'UTC' },
          ]}
          value={draft.zone}
          onChange={(event) => onChange({ zone: event.target.value === 'UTC' ? 'UTC' : 'site' })}
        />
        {draft.kind === 'heat' ? (
          <SelectField
            name="temperatureUnit"
            label={fileLabels.temperatureUnit}
            options={units}
            value={draft.temperatureUnit}
            onChange={(event) => onChange({ temperatureUnit: event.target.value === 'F' ? 'F' : 'C' })}
          />
        ) : null}
      </div>
    </>
  )
}

function orderOf(value: string): DateOrder {
  return value === 'day first' || value === 'month first' ? value : 'year first'
}
