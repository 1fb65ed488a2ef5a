import { FilterForm } from '@/components/ui/filter-form'
import type { SelectOption } from '@/components/ui/select-field'
import { SelectField } from '@/components/ui/select-field'
import { TextField } from '@/components/ui/text-field'

/** Search and choices of a list as a plain form, so that they live in the URL. */
export function SearchForm({
  action,
  values,
  hint,
  selects = [],
}: {
  action: string
  values: Readonly<Record<string, string>>
  /** What can be found: "Serial, recipe, customer". */
  hint: string
  selects?: readonly { name: string; label: string; options: readonly SelectOption[]; fallback: string }[]
}) {
  return (
    <FilterForm action={action} values={values}>
      <TextField
        name="q"
        type="search"
        label="Find"
        placeholder={hint}
        defaultValue={values['q']}
        className="w-64"
      />
      {selects.map((select) => (
        <SelectField
          key={select.name}
          name={select.name}
          label={select.label}
          options={select.options}
          defaultValue={values[select.name] ?? select.fallback}
        />
      ))}
    </FilterForm>
  )
}
