import { FormDialog } from '@/components/ui/form-dialog'
import type { SelectOption } from '@/components/ui/select-field'

/** Makes a batch; each of its pieces gets a serial and joins the queue of roses. */
export function NewBatch({
  customers,
  versions,
}: {
  customers: readonly SelectOption[]
  versions: readonly SelectOption[]
}) {
  return (
    <FormDialog
      openLabel="New batch"
      openKind="main"
      title="New batch"
      submitLabel="Make the batch"
      method="POST"
      path="/api/batches"
      doneHref="/batches/{id}"
      fields={[
        { name: 'customerId', label: 'Customer', kind: 'select', options: customers },
        {
          name: 'recipeVersionId',
          label: 'Recipe version',
          kind: 'select',
          options: versions,
          hint: 'Approved versions only.',
        },
        { name: 'pieceCount', label: 'How many', kind: 'number', defaultValue: 8 },
        { name: 'woodLot', label: 'Wood lot', kind: 'text' },
        { name: 'dueWeek', label: 'Due week', kind: 'text', hint: 'As 2027-W05.', isLeftOutWhenEmpty: true },
        { name: 'notes', label: 'Notes', kind: 'words', isLeftOutWhenEmpty: true },
      ]}
    />
  )
}
