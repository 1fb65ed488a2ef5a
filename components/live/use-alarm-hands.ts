'use client'

import { useCallback, useEffect, useState } from 'react'
import type { Problem } from '@/components/ui/problem'
import type { AlarmDto } from '@/lib/alarms/schema'
import { callApi, problemOf } from '@/lib/http/api-client'

export type AlarmHands = {
  /** Ids that this screen has taken note of. */
  seenHere: ReadonlySet<string>
  see: (id: string) => void
  /** Resolve to true when the server took it. */
  shelve: (id: string, minutes: number, reason: string) => Promise<boolean>
  unshelve: (id: string) => Promise<boolean>
  isBusy: boolean
  /** Why the last touch was not taken. */
  problem: Problem | null
}

const problemShownMs = 10_000

/** What hands do to alarms: a touch shows at once, and is taken back with the reason when the server refuses it. */
export function useAlarmHands(): AlarmHands {
  const [seenHere, setSeenHere] = useState<ReadonlySet<string>>(new Set())
  const [isBusy, setIsBusy] = useState(false)
  const [problem, setProblem] = useState<Problem | null>(null)

  useEffect(() => {
    if (problem === null) return
    const timer = setTimeout(() => setProblem(null), problemShownMs)
    return () => clearTimeout(timer)
  }, [problem])

  const send = useCallback(async (id: string, hand: string, body?: object): Promise<boolean> => {
    try {
      await callApi<AlarmDto>('POST', `/api/alarms/{id}/${hand}`, {
        params: { id },
        ...(body === undefined ? {} : { body }),
      })
      setProblem(null)
      return true
    } catch (error) {
      const { detail, title } = problemOf(error)
      setProblem({ title: detail === '' ? title : detail })
      return false
    }
  }, [])
  const see = useCallback(
    (id: string) => {
      setSeenHere((before) => new Set([...before, id]))
      void send(id, 'acknowledge').then((isTaken) => {
        if (isTaken) return
        setSeenHere((before) => new Set([...before].filter((one) => one !== id)))
      })
    },
    [send],
  )
  const busily = useCallback(async (work: () => Promise<boolean>) => {
    setIsBusy(true)
    const isTaken = await work()
    setIsBusy(false)
    return isTaken
  }, [])
  const shelve = useCallback(
    (id: string, minutes: number, reason: string) => busily(() => send(id, 'shelve', { minutes, reason })),
    [busily, send],
  )
  const unshelve = useCallback((id: string) => busily(() => send(id, 'unshelve')), [busily, send])
  return { seenHere, see, shelve, unshelve, isBusy, problem }
}
