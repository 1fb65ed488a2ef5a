'use client'

import { useCallback } from 'react'
import useSWR from 'swr'
import type { LossDto } from '@/lib/barrels/schema'
import { apiPath, callApi, getApi } from '@/lib/http/api-client'
import type { LossDraft } from './loss-draft'
import { lossBody } from './loss-draft'

type List = { items: LossDto[]; nextCursor: null }

/** The losses of a piece; noted, put right and taken back here. */
export function useLosses(pieceId: string, known?: readonly LossDto[]) {
  const path = apiPath('/api/barrels/{id}/losses', { id: pieceId })
  const { data, mutate } = useSWR(path, getApi<List>, {
    ...(known === undefined ? {} : { fallbackData: { items: [...known], nextCursor: null } }),
    revalidateOnMount: known === undefined,
  })
  const note = useCallback(
    async (draft: LossDraft) => {
      await callApi('POST', '/api/barrels/{id}/losses', { params: { id: pieceId }, body: lossBody(draft) })
      await mutate()
    },
    [pieceId, mutate],
  )
  const takeBack = useCallback(
    async (lossId: string, reason: string) => {
      const body = { id: crypto.randomUUID(), reason }
      await callApi('POST', '/api/losses/{id}/remove', { params: { id: lossId }, body })
      await mutate()
    },
    [mutate],
  )
  return { losses: data?.items ?? null, note, takeBack }
}

export type Losses = ReturnType<typeof useLosses>
