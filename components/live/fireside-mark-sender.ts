import {
  addToQueue,
  dropFromQueue,
  moveInQueue,
  nextToSend,
  noteResult,
  noteTry,
  parseQueue,
  printQueue,
  undoInQueue,
} from './fireside-mark-queue'
import type { MarkAuthor, MarkDraft, MarkQueue, SendResult } from './fireside-mark-queue'

/** The part of localStorage that is used; a test gives its own. */
export type MarkStorage = Pick<Storage, 'getItem' | 'setItem' | 'removeItem'>

export type MarkSender = {
  read: () => MarkQueue
  /** The last that the server took, as one list with the queue: shown until the firing is fetched with them. */
  readTaken: () => readonly MarkDraft[]
  subscribe: (onChange: () => void) => () => void
  add: (mark: MarkDraft) => void
  undo: (id: string, undoing: { id: string; at: string }) => void
  move: (mark: MarkDraft, moved: { id: string; at: string }) => MarkDraft
  /** Somebody else is signed in from now on, or nobody: what waited for them goes. */
  become: (author: MarkAuthor | null) => void
  drop: (id: string) => void
  /** Sends what waits of who is signed in, one after another, until all went or the server does not answer. */
  flush: () => Promise<void>
  /** Another tab of this browser wrote the queue. */
  reread: () => void
}

/** More than a toaster marks between two fetches. */
const TAKEN_KEPT = 40

/**
 * Keeps the queue in the browser and sends it, each mark while the person who made it is signed in. The kept list is read before every step, so that two tabs on one
 * firing do not write over each other; where the browser keeps nothing, memory does.
 */
export function createMarkSender(options: {
  key: string
  storage: MarkStorage | null
  /** `author` is who made it; left out where that was not kept. */
  send: (mark: MarkDraft, author?: MarkAuthor) => Promise<SendResult>
  onTaken?: (mark: MarkDraft) => void
  /** Who is signed in at first; null for nobody. Left out: marks are nobody’s in particular. */
  author?: MarkAuthor | null
}): MarkSender {
  const { key, storage, send } = options
  const listeners = new Set<() => void>()
  let queue: MarkQueue = readKept(storage, key) ?? []
  let underWay: Promise<void> | null = null
  let isKept = true
  let isAsked = false
  let signedIn = options.author
  let taken: readonly MarkDraft[] = []

  const change = (step: (from: MarkQueue) => MarkQueue) => {
    const from = isKept ? (readKept(storage, key) ?? queue) : queue
    queue = step(from)
    isKept = keep(storage, key, queue)
    for (const listener of listeners) listener()
  }

  /** With nobody signed in nothing goes. */
  const mine = () => {
    return signedIn === null ? null : nextToSend(queue, signedIn?.id)
  }
  const sendAll = async () => {
    for (let next = mine(); next !== null; next = mine()) {
      const { mark, author } = next
      change((from) => noteTry(from, mark.id))
      const result = await send(mark, author)
      // Before the queue lets go of it, so that it is always in one of the two.
      if (result.kind === 'taken') taken = [...taken.slice(1 - TAKEN_KEPT), mark]
      change((from) => noteResult(from, mark.id, result))
      if (result.kind === 'unanswered') return
      if (result.kind === 'taken') options.onTaken?.(mark)
    }
  }
  const sendUntilQuiet = async () => {
    try {
      while (isAsked) {
        isAsked = false
        await sendAll()
      }
    } finally {
      underWay = null
    }
  }
  /** One at a time: who asks meanwhile waits for the one under way, which then looks once more. */
  const flush = () => {
    isAsked = true
    underWay ??= sendUntilQuiet()
    return underWay
  }

  return {
    read: () => queue,
    readTaken: () => taken,
    subscribe: (onChange) => {
      listeners.add(onChange)
      return () => listeners.delete(onChange)
    },
    add: (mark) => {
      change((from) => addToQueue(from, mark, signedIn ?? undefined))
      void flush()
    },
    undo: (id, undoing) => {
      change((from) => undoInQueue(from, id, undoing, signedIn ?? undefined))
      void flush()
    },
    move: (mark, moved) => {
      let inForce = mark
      change((from) => {
        const step = moveInQueue(from, mark, moved, signedIn ?? undefined)
        inForce = step.mark
        return step.queue
      })
      void flush()
      return inForce
    },
    become: (author) => {
      signedIn = author
      void flush()
    },
    drop: (id) => change((from) => dropFromQueue(from, id)),
    flush,
    reread: () => change((from) => from),
  }
}

/** Null where the browser keeps nothing (private windows, a full disk). */
function readKept(storage: MarkStorage | null, key: string): MarkQueue | null {
  try {
    const text = storage?.getItem(key) ?? null
    return storage === null ? null : parseQueue(text)
  } catch {
    return null
  }
}

/** False when the browser did not keep it: memory then holds it until the page goes. */
function keep(storage: MarkStorage | null, key: string, queue: MarkQueue): boolean {
  try {
    if (queue.length === 0) storage?.removeItem(key)
    else storage?.setItem(key, printQueue(queue))
    return true
  } catch {
    return false
  }
}
