import type { adviceAnswers, calls, MarkKind, phases, shortStepKinds } from '@/lib/firings/schema'

/**
 * Marks on their way to the server. A mark is written here first and sent after; each carries its own uuid, so that
 * sending one again changes nothing. They go one at a time and in order, wait while the network is down, and outlive
 * a reload. Each keeps who made it: it goes only while that person is signed in, and waits while another is. Pure: what
 * is kept is a plain list, and every step gives a new one.
 */

export type MarkDraft = {
  /** The client's own uuid. */
  id: string
  kind: MarkKind
  /** ISO, UTC, by the server's clock. */
  at: string
  phase?: (typeof phases)[number]
  stagePosition?: number
  call?: (typeof calls)[number]
  words?: string
  step?: (typeof shortStepKinds)[number]
  answer?: (typeof adviceAnswers)[number]
  replacesId?: string
}

/** Who was signed in when a mark was made. */
export type MarkAuthor = { id: string; name: string }

export type QueuedMark = {
  mark: MarkDraft
  /** Left out in lists of before authors were kept: it goes as whoever is signed in. */
  author?: MarkAuthor
  /** How often it went out; the server may hold it once it did, whatever was answered. */
  tries: number
  /** The server's sentence when it would not have it; it then waits for the person, not for the network. */
  refusal: string | null
}

export type MarkQueue = readonly QueuedMark[]

/** How a sending ended: taken; refused for good with its sentence; or not answered, and tried again. */
export type SendResult = { kind: 'taken' } | { kind: 'refused'; sentence: string } | { kind: 'unanswered' }

export function addToQueue(queue: MarkQueue, mark: MarkDraft, author?: MarkAuthor): MarkQueue {
  if (queue.some((queued) => queued.mark.id === mark.id)) return queue
  return [...queue, { mark, ...(author === undefined ? {} : { author }), tries: 0, refusal: null }]
}

/** The one to send: the first that is not refused and is of the person who is signed in (left out: of anybody). */
export function nextToSend(queue: MarkQueue, authorId?: string): QueuedMark | null {
  const isTheirs = ({ author }: QueuedMark) =>
    authorId === undefined || author === undefined || author.id === authorId
  return queue.find((queued) => queued.refusal === null && isTheirs(queued)) ?? null
}

/** Those that wait for somebody else than who is signed in: their names, and how many marks of each. */
export function waitingForOthers(
  queue: MarkQueue,
  authorId: string | null,
): { name: string; count: number }[] {
  const byName = new Map<string, number>()
  for (const { author, refusal } of queue) {
    if (refusal !== null || author === undefined || author.id === authorId) continue
    byName.set(author.name, (byName.get(author.name) ?? 0) + 1)
  }
  return [...byName].map(([name, count]) => ({ name, count }))
}

export function noteTry(queue: MarkQueue, id: string): MarkQueue {
  return queue.map((queued) => (queued.mark.id === id ? { ...queued, tries: queued.tries + 1 } : queued))
}

export function noteResult(queue: MarkQueue, id: string, result: SendResult): MarkQueue {
  if (result.kind === 'unanswered') return queue
  if (result.kind === 'taken') return queue.filter((queued) => queued.mark.id !== id)
  // What corrects or undoes a mark that was refused has nothing to stand on.
  return queue
    .filter((queued) => queued.mark.replacesId !== id)
    .map((queued) => (queued.mark.id === id ? { ...queued, refusal: result.sentence } : queued))
}

/**
 * Takes a mark back. One that never went out is simply dropped; any other is undone by a mark of its own, since the
 * server may hold it.
 */
export function undoInQueue(
  queue: MarkQueue,
  id: string,
  undoing: { id: string; at: string },
  author?: MarkAuthor,
): MarkQueue {
  const queued = queue.find((one) => one.mark.id === id)
  if (queued?.refusal !== undefined && queued.refusal !== null) return dropFromQueue(queue, id)
  if (queued !== undefined && queued.tries === 0) return takeBack(queue, queued)
  return addToQueue(queue, { id: undoing.id, kind: 'undone', at: undoing.at, replacesId: id }, author)
}

/** A correction that never went out leaves what it corrected still to be undone, if the server has that. */
function takeBack(queue: MarkQueue, queued: QueuedMark): MarkQueue {
  const { replacesId } = queued.mark
  if (replacesId === undefined) return dropFromQueue(queue, queued.mark.id)
  return queue.map((one) => {
    if (one.mark.id !== queued.mark.id) return one
    return { ...one, mark: { id: one.mark.id, kind: 'undone', at: one.mark.at, replacesId } }
  })
}

/** Moves a mark to another time: in place while it never went out, else by a correcting mark. Gives the id now in force. */
export function moveInQueue(
  queue: MarkQueue,
  mark: MarkDraft,
  moved: { id: string; at: string },
  author?: MarkAuthor,
): { queue: MarkQueue; mark: MarkDraft } {
  const queued = queue.find((one) => one.mark.id === mark.id)
  if (queued !== undefined && queued.tries === 0) {
    const next = { ...queued.mark, at: moved.at }
    return { mark: next, queue: queue.map((one) => (one === queued ? { ...queued, mark: next } : one)) }
  }
  const correcting = { ...mark, id: moved.id, at: moved.at, replacesId: mark.id }
  return { mark: correcting, queue: addToQueue(queue, correcting, author) }
}

export function dropFromQueue(queue: MarkQueue, id: string): MarkQueue {
  return queue.filter((queued) => queued.mark.id !== id)
}

export function printQueue(queue: MarkQueue): string {
  return JSON.stringify({ v: 1, queue })
}

/** What was kept; nothing when it cannot be read. Single entries that do not fit are left out. */
export function parseQueue(text: string | null): MarkQueue {
  if (text === null) return []
  try {
    const kept: unknown = JSON.parse(text)
    const list: unknown = typeof kept === 'object' && kept !== null ? Reflect.get(kept, 'queue') : null
    return Array.isArray(list) ? list.filter(isQueuedMark) : []
  } catch {
    return []
  }
}

function isQueuedMark(value: unknown): value is QueuedMark {
  if (typeof value !== 'object' || value === null) return false
  const mark: unknown = Reflect.get(value, 'mark')
  const refusal: unknown = Reflect.get(value, 'refusal')
  return (
    typeof Reflect.get(value, 'tries') === 'number' &&
    (refusal === null || typeof refusal === 'string') &&
    isAuthor(Reflect.get(value, 'author')) &&
    typeof mark === 'object' &&
    mark !== null &&
    ['id', 'kind', 'at'].every((key) => typeof Reflect.get(mark, key) === 'string')
  )
}

function isAuthor(value: unknown): boolean {
  if (value === undefined) return true
  return (
    typeof value === 'object' &&
    value !== null &&
    ['id', 'name'].every((key) => typeof Reflect.get(value, key) === 'string')
  )
}
