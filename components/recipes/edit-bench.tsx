'use client'

import { useRouter } from 'next/navigation'
import { useCallback, useEffect, useMemo, useState } from 'react'
import { fieldId } from '@/components/ui/field-id'
import type { Problem } from '@/components/ui/problem'
import { useToast } from '@/components/ui/toast'
import type { TemperatureUnit } from '@/lib/format'
import type { ApiProblemBody } from '@/lib/http/api-client'
import { tryApi } from '@/lib/http/api-client'
import { contentDifferences } from '@/lib/recipes/content-differences'
import type { RecipeVersionDto } from '@/lib/recipes/schema'
import { recipeVersionSchema } from '@/lib/recipes/schema'
import { shownSentence } from '@/lib/recipes/shown-sentence'
import type { SiteRules } from '@/lib/science/site-rules'
import { EditBenchView } from './edit-bench-view'
import type { Draft, DraftErrors } from './editor-draft'
import { readDraft, toDraft } from './editor-draft'
import type { ShadowPlan } from './plan-pair'
import { StaleDialog } from './stale-dialog'
import { useHistory } from './use-history'

export type EditBenchProps = {
  version: RecipeVersionDto
  /** The version that this one started from. */
  shadow: ShadowPlan | null
  rules: SiteRules
  unit: TemperatureUnit
  /** Under the title. */
  sub: React.ReactNode
}

/** The fields of a problem without the body's own prefix, so that they find their inputs. */
function fieldsOf(problem: Problem): DraftErrors {
  return Object.fromEntries(
    Object.entries(problem.fields ?? {}).map(([path, sentence]) => [
      path.replace(/^content\./, ''),
      sentence,
    ]),
  )
}

function inUnit(errors: DraftErrors, unit: TemperatureUnit): DraftErrors {
  return Object.fromEntries(
    Object.entries(errors).map(([path, sentence]) => [path, shownSentence(path, sentence, unit)]),
  )
}

/** The bench of a draft: holds what is typed, saves it, sends it for review. The view draws. */
export function EditBench({ version, shadow, rules, unit, sub }: EditBenchProps) {
  const router = useRouter()
  const toast = useToast()
  const [saved, setSaved] = useState(() => ({ version, draft: toDraft(version.content) }))
  const { present: draft, change, undo, redo, endStep, canUndo, canRedo } = useHistory(saved.draft)
  const read = useMemo(() => readDraft(draft), [draft])
  const [asked, setAsked] = useState<DraftErrors>({})
  const [refused, setRefused] = useState<{ problem: Problem; draft: Draft } | null>(null)
  const [theirs, setTheirs] = useState<RecipeVersionDto | null>(null)
  const [isBusy, setIsBusy] = useState(false)
  const isUnsaved = useMemo(() => JSON.stringify(draft) !== JSON.stringify(saved.draft), [draft, saved])

  // An error is said once its field is left, and goes as soon as the field is right again; the server's stand until
  // something is changed.
  const errors = useMemo(() => {
    const said = Object.entries(read.errors ?? {}).filter(([path]) => path in asked)
    const fromServer = refused?.draft === draft ? fieldsOf(refused.problem) : {}
    return inUnit({ ...fromServer, ...Object.fromEntries(said) }, unit)
  }, [asked, draft, read, refused, unit])

  const leaveField = useCallback(() => {
    endStep()
    setAsked(read.errors ?? {})
  }, [endStep, read])

  const takeProblem = useCallback(
    (answer: ApiProblemBody) => {
      const current = recipeVersionSchema.safeParse(answer.current)
      if (answer.status === 409 && current.success && current.data.state === 'draft') setTheirs(current.data)
      else setRefused({ problem: answer, draft })
    },
    [draft],
  )

  const save = useCallback(
    async (revision: number): Promise<RecipeVersionDto | null> => {
      if (read.content === null) {
        setAsked(read.errors)
        setRefused(null)
        focusFirst(read.errors)
        return null
      }
      setIsBusy(true)
      const answer = await tryApi<RecipeVersionDto>('PUT', '/api/recipe-versions/{id}', {
        params: { id: version.id },
        body: { revision, content: read.content },
      })
      setIsBusy(false)
      if (answer.problem !== null) {
        takeProblem(answer.problem)
        return null
      }
      setSaved({ version: answer.data, draft })
      setRefused(null)
      setTheirs(null)
      return answer.data
    },
    [draft, read, takeProblem, version.id],
  )

  const saveNow = useCallback(async () => {
    if ((await save(saved.version.revision)) === null) return
    toast({ words: 'Saved.' })
    // What the server makes of the version, its predicted markers, is made anew; what is typed stays.
    router.refresh()
  }, [router, save, saved, toast])

  const send = useCallback(async () => {
    const sent = isUnsaved ? await save(saved.version.revision) : saved.version
    if (sent === null) return
    setIsBusy(true)
    const answer = await tryApi<RecipeVersionDto>('POST', '/api/recipe-versions/{id}/send-for-review', {
      params: { id: sent.id },
      body: { revision: sent.revision },
    })
    setIsBusy(false)
    if (answer.problem !== null) {
      takeProblem(answer.problem)
      return
    }
    toast({ words: `Version ${sent.number} is in review.` })
    router.refresh()
  }, [isUnsaved, router, save, saved, takeProblem, toast])

  const discard = useCallback(async (): Promise<Problem | null> => {
    const answer = await tryApi('DELETE', '/api/recipe-versions/{id}', { params: { id: version.id } })
    if (answer.problem !== null) return answer.problem
    // Nothing is left to lose: the page goes whole, without asking about what is unsaved.
    setSaved({ version, draft })
    const isLone = version.number === 1 && version.basedOnVersionId === null
    router.replace(isLone ? '/recipes' : `/recipes/${version.recipeId}`)
    return null
  }, [draft, router, version])

  useShortcuts({ save: saveNow, undo, redo })

  function keepMine() {
    if (theirs !== null) void save(theirs.revision)
  }

  function takeTheirs() {
    if (theirs === null) return
    const taken = toDraft(theirs.content)
    change(() => taken)
    setSaved({ version: theirs, draft: taken })
    setTheirs(null)
  }

  return (
    <>
      <EditBenchView
        version={saved.version}
        draft={draft}
        errors={errors}
        problem={refused?.problem ?? null}
        shadow={shadow}
        rules={rules}
        unit={unit}
        sub={sub}
        isUnsaved={isUnsaved}
        isBusy={isBusy}
        canUndo={canUndo}
        canRedo={canRedo}
        onChange={change}
        onLeaveField={leaveField}
        onUndo={undo}
        onRedo={redo}
        onSave={saveNow}
        onSend={send}
        onDiscard={discard}
      />
      <StaleDialog
        differences={
          theirs === null || read.content === null
            ? null
            : contentDifferences(read.content, theirs.content, unit)
        }
        isBusy={isBusy}
        onKeepMine={keepMine}
        onTakeTheirs={takeTheirs}
        onClose={() => setTheirs(null)}
      />
    </>
  )
}

function focusFirst(errors: DraftErrors): void {
  const first = Object.keys(errors)
    .map((path) => document.getElementById(fieldId(path)))
    .find((input) => input !== null)
  first?.focus()
}

/** Ctrl or Cmd with S saves, with Z undoes, with Shift Z or Y redoes, wherever the focus is. */
function useShortcuts({
  save,
  undo,
  redo,
}: {
  save: () => void | Promise<void>
  undo: () => void
  redo: () => void
}): void {
  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (!(event.ctrlKey || event.metaKey) || event.altKey) return
      const key = event.key.toLowerCase()
      // A dialog has its own fields, and its own undo.
      if (document.querySelector('dialog[open]') !== null) return
      if (key === 's') void save()
      else if (key === 'y' || (key === 'z' && event.shiftKey)) redo()
      else if (key === 'z') undo()
      else return
      event.preventDefault()
    }
    window.addEventListener('keydown', onKey)
    return () => window.removeEventListener('keydown', onKey)
  }, [save, undo, redo])
}
