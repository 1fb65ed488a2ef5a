'use client'

import { useCallback, useState } from 'react'
import useSWR from 'swr'
import type { PhotoKind } from '@/lib/firings/photo-kinds'
import type { PhotoDto } from '@/lib/firings/photo-schema'
import { apiPath, callApi, getApi, problemOf } from '@/lib/http/api-client'
import { sendPhoto } from './send-photo'

/** A picture that is on its way, or that was refused and is kept here to be sent again or dropped. */
export type PhotoUnderWay = {
  id: string
  /** An address within this page, for the small picture. */
  href: string
  file: File
  kind: PhotoKind
  caption: string
  share: number
  /** Why it did not go; null while it goes. */
  refusal: string | null
}

type List = { items: PhotoDto[]; nextCursor: null }

/** The photos of a firing, and those that a person has just taken. */
export function usePhotos(firingId: string, known?: readonly PhotoDto[]) {
  const path = apiPath('/api/firings/{id}/photos', { id: firingId })
  const { data, mutate } = useSWR(path, getApi<List>, {
    ...(known === undefined ? {} : { fallbackData: { items: [...known], nextCursor: null } }),
    revalidateOnMount: known === undefined,
  })
  const [underWay, setUnderWay] = useState<readonly PhotoUnderWay[]>([])
  const change = useCallback((id: string, part: Partial<PhotoUnderWay>) => {
    setUnderWay((before) => before.map((one) => (one.id === id ? { ...one, ...part } : one)))
  }, [])
  const drop = useCallback((photo: PhotoUnderWay) => {
    URL.revokeObjectURL(photo.href)
    setUnderWay((before) => before.filter((one) => one.id !== photo.id))
  }, [])
  const send = useCallback(
    async (photo: PhotoUnderWay) => {
      change(photo.id, { share: 0, refusal: null })
      try {
        await sendPhoto(firingId, photo, (share) => change(photo.id, { share }))
        await mutate()
        drop(photo)
      } catch (error) {
        change(photo.id, { refusal: problemOf(error).detail })
      }
    },
    [firingId, change, drop, mutate],
  )
  const take = useCallback(
    (files: readonly File[], kind: PhotoKind, caption = '') => {
      const taken = files.map((file) => ({
        id: crypto.randomUUID(),
        href: URL.createObjectURL(file),
        file,
        kind,
        caption,
        share: 0,
        refusal: null,
      }))
      setUnderWay((before) => [...before, ...taken])
      void Promise.all(taken.map(send))
    },
    [send],
  )
  const describe = useCallback(
    async (id: string, body: { kind: PhotoKind; caption: string }) => {
      await callApi('PUT', '/api/photos/{id}', { params: { id }, body })
      await mutate()
    },
    [mutate],
  )
  const remove = useCallback(
    async (id: string, reason: string) => {
      await callApi('POST', '/api/photos/{id}/remove', { params: { id }, body: { reason } })
      await mutate()
    },
    [mutate],
  )
  return { photos: data?.items ?? null, underWay, take, send, drop, describe, remove }
}

export type Photos = ReturnType<typeof usePhotos>

/** The address of a picture; it opens to whoever may read its firing. */
export function photoHref(id: string, size: 'large' | 'thumbnail'): string {
  return apiPath('/api/photos/{id}/{size}', { id, size })
}
