import { capitalize } from '@/lib/format'
import { FilterForm } from '@/components/ui/filter-form'
import { SelectField } from '@/components/ui/select-field'
import { TextField } from '@/components/ui/text-field'

const states = [
  { value: 'fired', label: 'Fired' },
  { value: 'live', label: 'Over the fire' },
  { value: 'queued', label: 'Waiting' },
  { value: 'abandoned', label: 'Abandoned' },
  { value: 'all', label: 'All' },
]

const verdicts = ['in tolerance', 'cannot tell', 'out of tolerance', 'limit broken', 'incomplete'].map(
  (value) => ({
    value,
    label: capitalize(value),
  }),
)

export type FilterOption = { value: string; label: string }

/** Search and filters of the firing list; a plain form, so that they live in the URL. */
export function FiringFilters({
  values,
  hearths,
  recipes,
  toasters,
}: {
  values: Readonly<Record<string, string>>
  hearths: readonly FilterOption[]
  recipes: readonly FilterOption[]
  toasters: readonly FilterOption[]
}) {
  return (
    <FilterForm action="/firings" values={values}>
      <TextField
        name="q"
        label="Find"
        type="search"
        placeholder="Barrel, batch, lot, recipe"
        defaultValue={values['q']}
        className="w-44"
      />
      <SelectField name="state" label="State" options={states} defaultValue={values['state'] ?? 'fired'} />
      <SelectField
        name="verdict"
        label="Verdict"
        placeholder="Any"
        options={verdicts}
        defaultValue={values['verdict'] ?? ''}
      />
      <SelectField
        name="hearth"
        label="Hearth"
        placeholder="Any"
        options={hearths}
        defaultValue={values['hearth'] ?? ''}
      />
      <SelectField
        name="recipeId"
        label="Recipe"
        placeholder="Any"
        options={recipes}
        defaultValue={values['recipeId'] ?? ''}
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
      <TextField name="from" label="From" type="date" defaultValue={values['from']} />
      <TextField name="to" label="To" type="date" defaultValue={values['to']} />
    </FilterForm>
  )
}
