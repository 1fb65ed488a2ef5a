'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import type { FormEvent } from 'react'
import { followLocalCode } from '@/components/live/fireside-cautions'
import { Button } from '@/components/ui/button'
import { Checkbox } from '@/components/ui/checkbox'
import { Dialog } from '@/components/ui/dialog'
import { FormError } from '@/components/ui/form-error'
import { useToast } from '@/components/ui/toast'
import { useRequest } from '@/components/ui/use-request'
import type { ExposurePreview, ExposureUploadDto } from '@/lib/conditions/schema'
import { formatCount } from '@/lib/format'
import { callApi } from '@/lib/http/api-client'
import { ExposureFilePreview } from './exposure-file-preview'
import { ExposureFileFields, fileLabels } from './exposure-file-fields'
import type { FileDraft } from './exposure-file-fields'

export function ExposureFileButton({ zone }: { zone: string }) {
  const [isOpen, setIsOpen] = useState(false)
  return (
    <>
      <Button onClick={() => setIsOpen(true)}>Take a meter’s file</Button>
      {isOpen ? <ExposureFileDialog zone={zone} onClose={() => setIsOpen(false)} /> : null}
    </>
  )
}

const empty: FileDraft = {
  kind: 'carbon monoxide',
  subject: '',
  fileName: '',
  text: '',
  dateOrder: 'year first',
  zone: 'site',
  temperatureUnit: 'C',
  columns: {},
}

/** A meter's CSV file: chosen, looked at with every line that cannot be read, and only then kept. */
function ExposureFileDialog({ zone, onClose }: { zone: string; onClose: () => void }) {
  const router = useRouter()
  const toast = useToast()
  const [id] = useState(() => crypto.randomUUID())
  const [draft, setDraft] = useState(empty)
  const [seen, setSeen] = useState<ExposurePreview | null>(null)
  const [skipsFaulty, setSkipsFaulty] = useState(false)
  const { isBusy, problem, setProblem, send } = useRequest()

  const change = (part: Partial<FileDraft>) => {
    // Another file, or another reading of it, is looked at anew; columns are those of one file.
    const columns = part.text === undefined && part.kind === undefined ? draft.columns : {}
    setDraft({ ...draft, columns, ...part })
    setSeen(null)
    setProblem(null)
  }
  const look = () =>
    send(async () => {
      setSeen(await callApi<ExposurePreview>('POST', '/api/exposure-files/preview', { body: draft }))
    })
  const keep = async () => {
    const isKept = await send(async () => {
      const body = { ...draft, id, skipsFaulty }
      const { readingCount } = await callApi<ExposureUploadDto>('POST', '/api/exposure-files', { body })
      toast({ words: `${formatCount(readingCount, 'reading')} kept.` })
    })
    if (!isKept) return
    onClose()
    router.refresh()
  }
  const isKeepable =
    seen !== null && seen.minuteCount > seen.alreadyThere && (seen.faultCount === 0 || skipsFaulty)
  const submit = (event: FormEvent) => {
    event.preventDefault()
    void (isKeepable ? keep() : look())
  }
  return (
    <Dialog
      isOpen
      onClose={onClose}
      title="Take a meter’s file"
      isBusy={isBusy}
      actions={
        <>
          <Button onClick={onClose} disabled={isBusy}>
            Cancel
          </Button>
          {isKeepable ? (
            <Button kind="due" type="submit" form="exposure-file-form" isBusy={isBusy}>
              {isBusy ? 'Keeping' : `Keep ${formatCount(seen.minuteCount - seen.alreadyThere, 'reading')}`}
            </Button>
          ) : (
            <Button
              kind="main"
              type="submit"
              form="exposure-file-form"
              isBusy={isBusy}
              disabled={draft.text === ''}
            >
              {isBusy ? 'Reading' : seen === null ? 'Look at it first' : 'Look again'}
            </Button>
          )}
        </>
      }
    >
      <form id="exposure-file-form" method="post" onSubmit={submit} noValidate className="grid gap-3">
        <FormError problem={problem} labels={fileLabels} />
        <p className="text-soft">
          CSV of a carbon monoxide or heat meter, decimal comma or point. Nothing is kept before you have seen
          it. {followLocalCode}
        </p>
        <ExposureFileFields draft={draft} onChange={change} fields={problem?.fields ?? {}} zone={zone} />
        {seen === null ? null : (
          <>
            <ExposureFilePreview
              seen={seen}
              kind={draft.kind}
              zone={zone}
              onColumns={(columns) => change({ columns: { ...draft.columns, ...columns } })}
            />
            {seen.faultCount === 0 ? null : (
              <Checkbox
                name="skipsFaulty"
                label={`Leave out the ${formatCount(seen.faultCount, 'line')} that cannot be read`}
                checked={skipsFaulty}
                onChange={(event) => setSkipsFaulty(event.target.checked)}
              />
            )}
          </>
        )}
      </form>
    </Dialog>
  )
}
