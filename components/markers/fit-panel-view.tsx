'use client'

import type { FormEvent } from 'react'
import { LeaveWarning } from '@/components/recipes/leave-warning'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { Notice } from '@/components/ui/notice'
import type { Problem } from '@/components/ui/problem'
import { TextArea } from '@/components/ui/text-area'
import type { FitPreview } from '@/lib/markers/schema'
import { AssayFields } from './assay-fields'
import type { FitDraft } from './fit-draft'
import { FitReport } from './fit-report'
import { PreviewTable } from './preview-table'

export type FitPanelViewProps = {
  name: string
  draft: FitDraft
  preview: FitPreview | null
  /** Something was changed since the preview. */
  isPreviewBehind: boolean
  isChanged: boolean
  problem: Problem | null
  isBusy: boolean
  onChange: (changes: Partial<FitDraft>) => void
  onLook: () => void
  onStore: () => void
}

/** Fields and pasted rows on one side, the preview of every row on the other, the fit under both. */
export function FitPanelView(props: FitPanelViewProps) {
  const { name, draft, preview, isPreviewBehind, problem, isBusy, onChange } = props
  const outcome = isPreviewBehind ? null : (preview?.outcome ?? null)
  const canStore = outcome?.ok === true
  const submit = (event: FormEvent) => {
    event.preventDefault()
    if (canStore) props.onStore()
    else props.onLook()
  }
  return (
    <form method="post" onSubmit={submit} noValidate>
      <LeaveWarning isUnsaved={props.isChanged && !isBusy} />
      <FormError problem={problem} />
      <div className="grid gap-x-9 gap-y-6 lg:grid-cols-2">
        <div className="min-w-0 space-y-4">
          <AssayFields draft={draft} problem={problem} onChange={onChange} />
          <TextArea
            name="rows"
            label="Results"
            rows={9}
            spellCheck={false}
            autoComplete="off"
            className="[&_textarea]:font-mono"
            hint="Paste two columns from a spreadsheet: barrel serial, or a dose in minutes read at the place above; then the result. Write <0.5 for one below a limit of 0.5."
            value={draft.rows}
            onChange={(event) => onChange({ rows: event.target.value })}
            error={problem?.fields?.['rows']}
          />
          <TextArea
            name="note"
            label="Note"
            isOptional
            rows={2}
            maxLength={1000}
            hint="Laboratory, date, report number; it stays with this response."
            value={draft.note}
            onChange={(event) => onChange({ note: event.target.value })}
            error={problem?.fields?.['note']}
          />
          <div className="flex flex-wrap items-center gap-2">
            <Button type="button" kind={canStore ? 'plain' : 'due'} isBusy={isBusy} onClick={props.onLook}>
              {preview === null ? 'Look at the fit' : 'Look again'}
            </Button>
            <Button type="submit" kind={canStore ? 'due' : 'main'} isBusy={isBusy} disabled={!canStore}>
              Put this fit in force
            </Button>
            <span role="status" className="text-soft">
              {statusWords(props)}
            </span>
          </div>
        </div>
        <div className="min-w-0">
          {preview === null ? (
            <p className="text-soft">
              Each row is looked up here before anything is stored: its barrel’s dose, and what is wrong with
              it if something is.
            </p>
          ) : (
            <PreviewTable preview={preview} unit={draft.unit} family={draft.family} />
          )}
        </div>
      </div>
      {outcome === null ? null : (
        <section aria-label="The fit" className="mt-6">
          {outcome.ok ? (
            <FitReport picture={outcome.picture} name={name} unit={draft.unit} />
          ) : (
            <Notice tone="attention" className="max-w-[70ch]">
              <p className="font-[640]">These results do not support this fit.</p>
              <p>{outcome.refusal}</p>
            </Notice>
          )}
        </section>
      )}
    </form>
  )
}

function statusWords({ preview, isPreviewBehind, isBusy }: FitPanelViewProps): string {
  if (isBusy) return 'Working.'
  if (preview === null) return ''
  if (isPreviewBehind) return 'Changed since the preview: look again.'
  const wrong = preview.rows.filter((row) => row.error !== null).length
  if (wrong > 0) return `${wrong === 1 ? 'One row' : `${wrong} rows`} to mend or take out.`
  return preview.outcome?.ok === true
    ? `${preview.rows.length} rows, all used.`
    : 'These results do not support this fit: why stands below.'
}
