'use client'

import { useCallback, useState } from 'react'
import type { Problem } from '@/components/ui/problem'
import { problemOf } from '@/lib/http/api-client'

/** A request of a form or dialog: busy while under way, and the problem to show when it was refused. */
export function useRequest() {
  const [isBusy, setIsBusy] = useState(false)
  const [problem, setProblem] = useState<Problem | null>(null)
  /** Runs it; true when it went through. */
  const send = useCallback(async (work: () => Promise<unknown>): Promise<boolean> => {
    setIsBusy(true)
    try {
      await work()
      setProblem(null)
      return true
    } catch (error) {
      setProblem(problemOf(error))
      return false
    } finally {
      setIsBusy(false)
    }
  }, [])
  return { isBusy, problem, setProblem, send }
}
