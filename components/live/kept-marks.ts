import type { MarkAuthor, QueuedMark } from './fireside-mark-queue'
import { nextToSend, parseQueue } from './fireside-mark-queue'
import { createMarkSender } from './fireside-mark-sender'
import { browserStorage, markKeyPrefix, sendMark } from './use-mark-sender'

/** A firing that has marks on their way in this browser. */
export type KeptMarks = { firingId: string; queue: readonly QueuedMark[] }

/** What this browser keeps of all firings. */
export function readKeptMarks(): KeptMarks[] {
  const storage = browserStorage()
  if (storage === null) return []
  const keys = Array.from({ length: storage.length }, (_, i) => storage.key(i)).filter(
    (key): key is string => key?.startsWith(markKeyPrefix) === true,
  )
  return keys
    .map((key) => ({ firingId: key.slice(markKeyPrefix.length), queue: parseQueue(storage.getItem(key)) }))
    .filter(({ queue }) => queue.length > 0)
}

/**
 * Sends what waits of a person, firing by firing. True when nothing of theirs waits any more (a refused one does not:
 * it is shown until somebody has seen it).
 */
export async function sendKeptMarks(author: MarkAuthor): Promise<boolean> {
  for (const { firingId } of readKeptMarks()) {
    const sender = createMarkSender({
      key: `${markKeyPrefix}${firingId}`,
      storage: browserStorage(),
      send: (mark, by) => sendMark(firingId, mark, by),
      author,
    })
    await sender.flush()
  }
  return readKeptMarks().every(({ queue }) => nextToSend(queue, author.id) === null)
}

/** Somebody has seen that a mark was refused. */
export function dropKeptMark(firingId: string, markId: string): void {
  createMarkSender({
    key: `${markKeyPrefix}${firingId}`,
    storage: browserStorage(),
    send: async () => ({ kind: 'unanswered' }),
    author: null,
  }).drop(markId)
}
