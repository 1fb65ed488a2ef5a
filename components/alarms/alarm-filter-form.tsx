import { FilterForm } from '@/components/ui/filter-form'
import { SelectField } from '@/components/ui/select-field'
import { TextField } from '@/components/ui/text-field'
import { alarmCatalog, alarmKinds } from '@/lib/alarms/alarm-kinds'

export type FilterOption = { value: string; label: string }

const kinds = [
  ...alarmKinds.map((kind) => ({ value: kind, label: alarmCatalog[kind].name })),
  { value: 'all', label: 'All, and reminders' },
]

/** Days, hearth and toaster hold for the rates too; a plain form, so that the filters live in the address. */
export function AlarmFilterForm({
  values,
  hearths,
  toasters,
}: {
  values: Readonly<Record<string, string>>
  hearths: readonly FilterOption[]
  /** Empty for those who see their own only. */
  toasters: readonly FilterOption[]
}) {
  return (
    <FilterForm action="/alarms" values={values}>
      <TextField name="from" label="From" type="date" defaultValue={values['from']} />
      <TextField name="to" label="To" type="date" defaultValue={values['to']} />
      <SelectField
        name="hearth"
        label="Hearth"
        placeholder="Any"
        options={hearths}
        defaultValue={values['hearth'] ?? ''}
      />
      {toasters.length === 0 ? null : (
        <SelectField
          name="toasterId"
          label="Toaster"
          placeholder="Any"
          options={toasters}
          defaultValue={values['toasterId'] ?? ''}
        />
      )}
      <SelectField
        name="kind"
        label="Alarm"
        placeholder="All alarms"
        options={kinds}
        defaultValue={values['kind'] ?? ''}
      />
    </FilterForm>
  )
}
