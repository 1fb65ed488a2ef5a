'use client'

import { useCallback } from 'react'
import { tryApi } from '@/lib/http/api-client'
import type { PersonView } from './device-view'
import { sendKeptMarks } from './kept-marks'

/** Signs whoever is at a shared tablet out: their waiting marks go first, the device stays what it is. */
export function useSignOut(person: PersonView | null, onDone: () => void): () => void {
  return useCallback(() => {
    void (async () => {
      if (person !== null) await sendKeptMarks(person)
      const { problem } = await tryApi('DELETE', '/api/session')
      if (problem === null || problem.status === 401) onDone()
    })()
  }, [person, onDone])
}
