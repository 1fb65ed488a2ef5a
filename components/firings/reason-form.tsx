'use client'

import { useRouter } from 'next/navigation'
import { useId, useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { TextField } from '@/components/ui/text-field'
import { useRequest } from '@/components/ui/use-request'
import type { ShortStepKind } from '@/lib/firings/short-steps'
import { usualReasons } from '@/lib/firings/short-steps'
import { callApi } from '@/lib/http/api-client'

/** The reason that nobody gave at the fire, given afterwards; it says by its time that it came late. */
export function ReasonForm({
  firingId,
  step,
  stagePosition,
}: {
  firingId: string
  step: ShortStepKind
  stagePosition: number | null
}) {
  const router = useRouter()
  const listId = useId()
  const [words, setWords] = useState('')
  const [isAsked, setIsAsked] = useState(false)
  // One id for all tries: sent again, it is the same mark.
  const [markId] = useState(() => crypto.randomUUID())
  const { isBusy, problem, send } = useRequest()
  const keep = async (event: FormEvent) => {
    event.preventDefault()
    setIsAsked(true)
    if (words.trim() === '') return
    const position = stagePosition === null ? {} : { stagePosition }
    const body = {
      id: markId,
      kind: 'reason',
      at: new Date().toISOString(),
      step,
      ...position,
      words: words.trim(),
    }
    const isDone = await send(() =>
      callApi('POST', '/api/firings/{id}/marks', { params: { id: firingId }, body }),
    )
    if (isDone) router.refresh()
  }
  return (
    <form method="post" onSubmit={(event) => void keep(event)} noValidate className="mt-1">
      <FormError problem={problem} labels={{ words: 'Reason' }} />
      <div className="flex items-end gap-2">
        <TextField
          name="words"
          label="No reason was given. Why?"
          list={listId}
          maxLength={500}
          autoComplete="off"
          value={words}
          onChange={(event) => setWords(event.target.value)}
          error={isAsked && words.trim() === '' ? 'Write a few words.' : undefined}
        />
        <Button type="submit" isBusy={isBusy}>
          Keep it
        </Button>
      </div>
      <datalist id={listId}>
        {usualReasons[step].map((usual) => (
          <option key={usual} value={usual} />
        ))}
      </datalist>
    </form>
  )
}
