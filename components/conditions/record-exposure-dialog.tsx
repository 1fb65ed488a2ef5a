'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import type { FormEvent } from 'react'
import { followLocalCode } from '@/components/live/fireside-cautions'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { NumberField } from '@/components/ui/number-field'
import { SelectField } from '@/components/ui/select-field'
import { TemperatureField } from '@/components/ui/temperature-field'
import { TextField } from '@/components/ui/text-field'
import { useRequest } from '@/components/ui/use-request'
import { alarmDecides } from '@/lib/conditions/missing-words'
import type { TemperatureUnit } from '@/lib/format'
import { callApi } from '@/lib/http/api-client'
import { RecordDialog } from './record-dialog'
import { shownFields } from './shown-fields'
import { useWhen, WhenFields } from './when-fields'
import type { WriteDay } from './when-fields'

type Props = WriteDay & { unit: TemperatureUnit }

export function RecordExposureButton(props: Props) {
  const [isOpen, setIsOpen] = useState(false)
  return (
    <>
      <Button onClick={() => setIsOpen(true)}>Record CO or heat</Button>
      {isOpen ? <RecordExposure {...props} onClose={() => setIsOpen(false)} /> : null}
    </>
  )
}

const kinds = [
  { value: 'carbon monoxide', label: 'Carbon monoxide' },
  { value: 'heat', label: 'Heat: WBGT, or wet bulb and globe' },
]

const labels = {
  kind: 'What',
  subject: 'Worn by, or where',
  at: 'Time',
  ppm: 'Carbon monoxide',
  wbgtC: 'WBGT',
  wetBulbC: 'Natural wet bulb',
  globeC: 'Globe',
}

type Values = { ppm: number | null; wbgtC: number | null; wetBulbC: number | null; globeC: number | null }
const none: Values = { ppm: null, wbgtC: null, wetBulbC: null, globeC: null }

function RecordExposure({ unit, onClose, ...day }: Props & { onClose: () => void }) {
  const router = useRouter()
  const when = useWhen(day)
  const [id] = useState(() => crypto.randomUUID())
  const [kind, setKind] = useState('carbon monoxide')
  const [subject, setSubject] = useState('')
  const [values, setValues] = useState(none)
  const [isAsked, setIsAsked] = useState(false)
  const { isBusy, problem, send } = useRequest()
  const fields = shownFields(problem?.fields ?? {}, unit)

  const save = async (event: FormEvent) => {
    event.preventDefault()
    setIsAsked(true)
    if (when.at === null) return
    const own = kind === 'heat' ? { ...values, ppm: null } : { ...none, ppm: values.ppm }
    const body = { id, kind, subject, at: when.at, ...own }
    if (!(await send(() => callApi('POST', '/api/exposure-readings', { body })))) return
    onClose()
    router.refresh()
  }
  return (
    <RecordDialog
      title="Record carbon monoxide or heat"
      formId="exposure-form"
      isBusy={isBusy}
      onSave={(event) => void save(event)}
      onClose={onClose}
    >
      <FormError problem={problem} labels={labels} />
      <p className="text-soft">
        A record and a reminder. {alarmDecides} {followLocalCode}
      </p>
      <SelectField
        name="kind"
        label={labels.kind}
        options={kinds}
        value={kind}
        onChange={(event) => setKind(event.target.value)}
        error={fields['kind']}
      />
      <TextField
        name="subject"
        label={labels.subject}
        hint="T. Okafor, or hearth 2. Means are made for each apart."
        maxLength={60}
        value={subject}
        onChange={(event) => setSubject(event.target.value)}
        error={fields['subject']}
      />
      <WhenFields when={when} zone={day.zone} error={fields['at'] ?? (isAsked ? when.fault : undefined)} />
      {kind === 'heat' ? (
        <HeatFields values={values} onValues={setValues} unit={unit} fields={fields} />
      ) : (
        <NumberField
          name="ppm"
          label={labels.ppm}
          isRequired
          unit="ppm"
          value={values.ppm}
          onValueChange={(ppm) => setValues((before) => ({ ...before, ppm }))}
          min={0}
          max={10_000}
          what="the ppm"
          error={fields['ppm']}
        />
      )}
    </RecordDialog>
  )
}

function HeatFields({
  values,
  onValues,
  unit,
  fields,
}: {
  values: Values
  onValues: (change: (before: Values) => Values) => void
  unit: TemperatureUnit
  fields: Readonly<Record<string, string>>
}) {
  const field = (key: 'wbgtC' | 'wetBulbC' | 'globeC', most: number) => ({
    name: key,
    label: labels[key],
    isOptional: true,
    personUnit: unit,
    valueC: values[key],
    onValueChangeC: (value: number | null) => onValues((before) => ({ ...before, [key]: value })),
    minC: -20,
    maxC: most,
    error: fields[key],
  })
  return (
    <>
      <TemperatureField {...field('wbgtC', 80)} hint="As the meter shows it; or else both below." />
      <div className="grid grid-cols-2 gap-4">
        <TemperatureField {...field('wetBulbC', 80)} />
        <TemperatureField {...field('globeC', 150)} />
      </div>
    </>
  )
}
