'use client'

import { useRouter } from 'next/navigation'
import { useCallback, useEffect, useState } from 'react'
import type { Problem } from '@/components/ui/problem'
import { useToast } from '@/components/ui/toast'
import { tryApi } from '@/lib/http/api-client'
import type { MarkerDesk } from '@/lib/markers/get-marker-desk'
import type { CheckedFormula, MarkerDetail, MarkerResponseDto } from '@/lib/markers/schema'
import type { AssayUnit } from '@/lib/science/formula-units'
import { FormulaEditorView } from './formula-editor-view'

/** Waits for a pause in typing before the server is asked. */
const pauseMs = 300

export type FormulaEditorProps = Pick<MarkerDesk, 'symbols' | 'functions'> & {
  markerId: string
  unit: AssayUnit
  formula: string
  inForce: MarkerResponseDto | null
}

/** The editor of a formula: the server reads it as one types, and stores it. The view draws. */
export function FormulaEditor({ markerId, inForce, symbols, functions, ...start }: FormulaEditorProps) {
  const router = useRouter()
  const toast = useToast()
  const [formula, setFormula] = useState(start.formula)
  const [unit, setUnit] = useState<AssayUnit>(start.unit)
  const [note, setNote] = useState('')
  const [checked, setChecked] = useState<{ of: string; answer: CheckedFormula } | null>(null)
  const [problem, setProblem] = useState<Problem | null>(null)
  const [isBusy, setIsBusy] = useState(false)
  const asked = `${unit} ${formula}`

  useEffect(() => {
    if (formula.trim() === '') return
    const controller = new AbortController()
    const timer = setTimeout(async () => {
      try {
        const answer = await tryApi<CheckedFormula>('POST', '/api/markers/{id}/formula-check', {
          params: { id: markerId },
          body: { formula, unit },
          signal: controller.signal,
        })
        if (controller.signal.aborted) return
        if (answer.problem !== null) setProblem(answer.problem)
        else {
          setProblem(null)
          setChecked({ of: asked, answer: answer.data })
        }
      } catch (error) {
        // A newer letter was typed: its own question is on its way.
        if (!controller.signal.aborted) throw error
      }
    }, pauseMs)
    return () => {
      clearTimeout(timer)
      controller.abort()
    }
  }, [asked, formula, markerId, unit])

  const save = useCallback(async () => {
    setIsBusy(true)
    const answer = await tryApi<MarkerDetail>('POST', '/api/markers/{id}/formulas', {
      params: { id: markerId },
      body: { formula, unit, note, seenNumber: inForce?.number ?? 0 },
    })
    setIsBusy(false)
    if (answer.problem !== null) {
      setProblem(answer.problem)
      // Somebody else's response is shown by the page; what was typed stays.
      if (answer.problem.status === 409) router.refresh()
      return
    }
    setProblem(null)
    toast({ words: `Response ${answer.data.response?.number ?? ''} is in force.` })
    router.push(`/markers/${markerId}`)
    router.refresh()
  }, [formula, inForce, markerId, note, router, toast, unit])

  return (
    <FormulaEditorView
      formula={formula}
      unit={unit}
      note={note}
      checked={formula.trim() === '' ? null : (checked?.answer ?? null)}
      isChecking={formula.trim() !== '' && checked?.of !== asked && problem === null}
      isChanged={formula !== start.formula || unit !== start.unit || note !== ''}
      isInForce={inForce?.kind === 'formula' && inForce.formula === formula && inForce.unit === unit}
      problem={problem}
      isBusy={isBusy}
      symbols={symbols}
      functions={functions}
      onFormula={setFormula}
      onUnit={setUnit}
      onNote={setNote}
      onSave={save}
    />
  )
}
