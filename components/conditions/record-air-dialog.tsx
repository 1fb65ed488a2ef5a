'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { NumberField } from '@/components/ui/number-field'
import { SelectField } from '@/components/ui/select-field'
import { TemperatureField } from '@/components/ui/temperature-field'
import { useToast } from '@/components/ui/toast'
import { useRequest } from '@/components/ui/use-request'
import type { AirReadingDto } from '@/lib/conditions/schema'
import { formatNumber } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { callApi } from '@/lib/http/api-client'
import { RecordDialog } from './record-dialog'
import { shownFields } from './shown-fields'
import { useWhen, WhenFields } from './when-fields'
import type { WriteDay } from './when-fields'

type Props = WriteDay & { unit: TemperatureUnit }

export function RecordAirButton(props: Props) {
  const [isOpen, setIsOpen] = useState(false)
  return (
    <>
      <Button kind="main" onClick={() => setIsOpen(true)}>
        Record the air
      </Button>
      {isOpen ? <RecordAir {...props} onClose={() => setIsOpen(false)} /> : null}
    </>
  )
}

const places = [
  { value: 'room', label: 'Room' },
  { value: 'yard', label: 'Yard' },
]

function RecordAir({ unit, onClose, ...day }: Props & { onClose: () => void }) {
  const router = useRouter()
  const toast = useToast()
  const when = useWhen(day)
  const [id] = useState(() => crypto.randomUUID())
  const [place, setPlace] = useState('room')
  const [tempC, setTempC] = useState<number | null>(null)
  const [humidityPercent, setHumidityPercent] = useState<number | null>(null)
  const [isAsked, setIsAsked] = useState(false)
  const { isBusy, problem, send } = useRequest()
  const fields = shownFields(problem?.fields ?? {}, unit)

  const save = async (event: FormEvent) => {
    event.preventDefault()
    setIsAsked(true)
    if (when.at === null) return
    const body = { id, place, at: when.at, tempC, humidityPercent }
    const isSaved = await send(async () => {
      const kept = await callApi<AirReadingDto>('POST', '/api/condition-readings', { body })
      const moisture = kept.equilibriumMoisturePercent
      toast({
        words: `Kept.${moisture === null ? '' : ` Wood comes to ${formatNumber(moisture, 1)} % in such air.`}`,
      })
    })
    if (!isSaved) return
    onClose()
    router.refresh()
  }
  return (
    <RecordDialog
      title="Record the air"
      formId="air-form"
      isBusy={isBusy}
      onSave={(event) => void save(event)}
      onClose={onClose}
    >
      <FormError
        problem={problem}
        labels={{ place: 'Place', at: 'Time', tempC: 'Air', humidityPercent: 'Humidity' }}
      />
      <SelectField
        name="place"
        label="Place"
        options={places}
        value={place}
        onChange={(event) => setPlace(event.target.value)}
        error={fields['place']}
      />
      <WhenFields when={when} zone={day.zone} error={fields['at'] ?? (isAsked ? when.fault : undefined)} />
      <div className="grid grid-cols-2 gap-4">
        <TemperatureField
          name="tempC"
          label="Air"
          isRequired
          personUnit={unit}
          valueC={tempC}
          onValueChangeC={setTempC}
          minC={-40}
          maxC={60}
          error={fields['tempC']}
        />
        <NumberField
          name="humidityPercent"
          label="Relative humidity"
          isRequired
          unit="%"
          value={humidityPercent}
          onValueChange={setHumidityPercent}
          min={0}
          max={100}
          what="the humidity in %"
          error={fields['humidityPercent']}
        />
      </div>
    </RecordDialog>
  )
}
