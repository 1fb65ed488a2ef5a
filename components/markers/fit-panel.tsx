'use client'

import { useRouter } from 'next/navigation'
import { useCallback, useState } from 'react'
import type { Problem } from '@/components/ui/problem'
import { useToast } from '@/components/ui/toast'
import { tryApi } from '@/lib/http/api-client'
import type { FitPreview, MarkerDetail, MarkerResponseDto } from '@/lib/markers/schema'
import type { LeadPlace } from '@/lib/recipes/schema'
import type { AssayUnit } from '@/lib/science/formula-units'
import type { FitDraft } from './fit-draft'
import { previewBody, startDraft } from './fit-draft'
import { FitPanelView } from './fit-panel-view'

export type FitPanelProps = {
  marker: { id: string; name: string; unit: AssayUnit }
  /** Of the response in force; 0 for none. */
  seenNumber: number
  /** The fit that this one begins from. */
  start: Extract<MarkerResponseDto, { kind: 'fit' }> | null
  usualPlace: LeadPlace
}

/** Pasted results: looked at first, then stored. Holds what is typed and asks the server; the view draws. */
export function FitPanel({ marker, seenNumber, start, usualPlace }: FitPanelProps) {
  const router = useRouter()
  const toast = useToast()
  const [first] = useState(() => startDraft(marker.unit, usualPlace, start))
  const [draft, setDraft] = useState<FitDraft>(first)
  const [preview, setPreview] = useState<{ of: string; answer: FitPreview } | null>(null)
  const [problem, setProblem] = useState<Problem | null>(null)
  const [isBusy, setIsBusy] = useState(false)
  const asked = JSON.stringify(previewBody(draft))

  const look = useCallback(async () => {
    setIsBusy(true)
    const answer = await tryApi<FitPreview>('POST', '/api/markers/{id}/fit-preview', {
      params: { id: marker.id },
      body: previewBody(draft),
    })
    setIsBusy(false)
    setProblem(answer.problem)
    setPreview(answer.problem === null ? { of: asked, answer: answer.data } : null)
  }, [asked, draft, marker.id])

  const store = useCallback(async () => {
    setIsBusy(true)
    const answer = await tryApi<MarkerDetail>('POST', '/api/markers/{id}/fits', {
      params: { id: marker.id },
      body: { ...draft, seenNumber },
    })
    setIsBusy(false)
    if (answer.problem !== null) {
      setProblem(answer.problem)
      // Somebody else's response is shown by the page; what was typed stays.
      if (answer.problem.status === 409) router.refresh()
      return
    }
    toast({ words: `Response ${answer.data.response?.number ?? ''} is in force.` })
    router.push(`/markers/${marker.id}`)
    router.refresh()
  }, [draft, marker.id, router, seenNumber, toast])

  return (
    <FitPanelView
      name={marker.name}
      draft={draft}
      preview={preview?.answer ?? null}
      isPreviewBehind={preview !== null && preview.of !== asked}
      isChanged={JSON.stringify(draft) !== JSON.stringify(first)}
      problem={problem}
      isBusy={isBusy}
      onChange={(changes) => setDraft((now) => ({ ...now, ...changes }))}
      onLook={look}
      onStore={store}
    />
  )
}
