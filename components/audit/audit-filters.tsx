import { FilterForm } from '@/components/ui/filter-form'
import { TextField } from '@/components/ui/text-field'

const fields = [
  { name: 'actor', label: 'Who', type: 'search', width: 'w-44' },
  { name: 'action', label: 'What', type: 'search', width: 'w-44' },
  { name: 'subjectType', label: 'Of what kind', type: 'search', width: 'w-40' },
  { name: 'subjectId', label: 'Its number', type: 'search', width: 'w-44' },
  { name: 'from', label: 'From', type: 'date', width: 'w-40' },
  { name: 'to', label: 'To', type: 'date', width: 'w-40' },
] as const

/** The filters of the trail, as a plain form: they live in the address. */
export function AuditFilters({ values }: { values: Readonly<Record<string, string>> }) {
  return (
    <FilterForm action="/audit" values={values}>
      {fields.map(({ name, label, type, width }) => (
        <TextField
          key={name}
          name={name}
          label={label}
          type={type}
          className={width}
          defaultValue={values[name]}
        />
      ))}
    </FilterForm>
  )
}
