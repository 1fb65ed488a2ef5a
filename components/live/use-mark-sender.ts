'use client'

import { useEffect, useState, useSyncExternalStore } from 'react'
import { apiPath, isApiProblem, tryApi } from '@/lib/http/api-client'
import type { MarkDto } from '@/lib/firings/schema'
import type { MarkAuthor, MarkDraft, MarkQueue, SendResult } from './fireside-mark-queue'
import { createMarkSender } from './fireside-mark-sender'
import type { MarkSender } from './fireside-mark-sender'

const RETRY_MS = 2_000
const empty: MarkQueue = []

/**
 * The mark sender of a firing in this browser: sends at once, again when the network is back, and every two seconds.
 * `author` is who is signed in; at a shared tablet that changes while the page stays.
 */
export function useMarkSender(
  firingId: string,
  onTaken: () => void,
  author: MarkAuthor | null,
): { sender: MarkSender; queue: MarkQueue; taken: readonly MarkDraft[] } {
  const [sender] = useState(() =>
    createMarkSender({
      key: markKey(firingId),
      storage: browserStorage(),
      send: (mark, by) => sendMark(firingId, mark, by),
      onTaken,
      author,
    }),
  )
  useEffect(() => sender.become(author), [sender, author])
  const queue = useSyncExternalStore(sender.subscribe, sender.read, () => empty)
  useEffect(() => {
    const flush = () => void sender.flush()
    const reread = (event: StorageEvent) => {
      if (event.key === markKey(firingId)) sender.reread()
    }
    flush()
    const timer = setInterval(flush, RETRY_MS)
    window.addEventListener('online', flush)
    window.addEventListener('storage', reread)
    return () => {
      clearInterval(timer)
      window.removeEventListener('online', flush)
      window.removeEventListener('storage', reread)
    }
  }, [sender, firingId])
  return { sender, queue, taken: sender.readTaken() }
}

export const markKeyPrefix = 'emberstave.marks.'

function markKey(firingId: string): string {
  return `${markKeyPrefix}${firingId}`
}

export function browserStorage(): Storage | null {
  try {
    return typeof window === 'undefined' ? null : window.localStorage
  } catch {
    return null
  }
}

/** A refusal is for good only when the server understood the mark and will not have it. */
export async function sendMark(firingId: string, mark: MarkDraft, author?: MarkAuthor): Promise<SendResult> {
  try {
    const path = apiPath('/api/firings/{id}/marks', { id: firingId })
    const { problem } = await tryApi<MarkDto>('POST', path, {
      body: author === undefined ? mark : { ...mark, authorId: author.id },
    })
    if (problem === null) return { kind: 'taken' }
    return isRefusal(problem.status)
      ? { kind: 'refused', sentence: Object.values(problem.fields)[0] ?? problem.detail }
      : { kind: 'unanswered' }
  } catch (error) {
    if (isApiProblem(error)) return { kind: 'unanswered' }
    throw error
  }
}

/** Not when nobody answered, the session ended (signing in again sends it), or the server is busy. */
export function isRefusal(status: number): boolean {
  return status >= 400 && status < 500 && status !== 401 && status !== 408 && status !== 429
}
