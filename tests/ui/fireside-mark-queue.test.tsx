import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import {
  addToQueue,
  moveInQueue,
  nextToSend,
  noteResult,
  noteTry,
  parseQueue,
  printQueue,
  undoInQueue,
} from '@/components/live/fireside-mark-queue'
import type { MarkDraft, MarkQueue, SendResult } from '@/components/live/fireside-mark-queue'
import { createMarkSender } from '@/components/live/fireside-mark-sender'
import type { MarkStorage } from '@/components/live/fireside-mark-sender'
import { isRefusal } from '@/components/live/use-mark-sender'

const fixed = { seed: 20270201, numRuns: 300 }
const at = (second: number) => new Date(Date.UTC(2027, 1, 1, 13, 0, second)).toISOString()
const draft = (n: number): MarkDraft => ({ id: `mark-${n}`, kind: 'feed', at: at(n) })

function memoryStorage(): MarkStorage {
  const kept = new Map<string, string>()
  return {
    getItem: (key) => kept.get(key) ?? null,
    setItem: (key, value) => void kept.set(key, value),
    removeItem: (key) => void kept.delete(key),
  }
}

/** A server that keeps marks by id, as the real one does, over a network that loses requests and answers. */
function shakyServer(network: readonly ('through' | 'request lost' | 'answer lost')[]) {
  const kept = new Map<string, MarkDraft>()
  let call = 0
  return {
    kept,
    send: async (mark: MarkDraft): Promise<SendResult> => {
      const fate = network[call] ?? 'through'
      call += 1
      if (fate === 'request lost') return { kind: 'unanswered' }
      if (!kept.has(mark.id)) kept.set(mark.id, mark)
      return fate === 'answer lost' ? { kind: 'unanswered' } : { kind: 'taken' }
    },
  }
}

const fates = fc.array(fc.constantFrom('through', 'request lost', 'answer lost'), { maxLength: 40 })

describe('marks on their way', () => {
  test('every mark reaches the server once and in order, whatever the network does and however often the page is loaded again', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.integer({ min: 1, max: 12 }),
        fates,
        fc.array(fc.integer({ min: 0, max: 12 }), { maxLength: 6 }),
        async (count, network, reloadsBefore) => {
          const storage = memoryStorage()
          const server = shakyServer(network)
          const open = () => createMarkSender({ key: 'k', storage, send: server.send })
          let sender = open()
          for (let n = 0; n < count; n += 1) {
            if (reloadsBefore.includes(n)) sender = open()
            sender.add(draft(n))
          }
          sender = open()
          for (let tries = 0; tries < 60 && sender.read().length > 0; tries += 1) await sender.flush()
          // The last sender's own view, and what the next load would find.
          await sender.flush()
          expect(open().read()).toEqual([])
          expect([...server.kept.keys()]).toEqual(Array.from({ length: count }, (_, n) => `mark-${n}`))
        },
      ),
      fixed,
    )
  })

  test('a mark waits while the network is down and outlives a reload', async () => {
    const storage = memoryStorage()
    const down = createMarkSender({ key: 'k', storage, send: async () => ({ kind: 'unanswered' }) })
    down.add(draft(1))
    down.add(draft(2))
    await down.flush()
    const sent: string[] = []
    const later = createMarkSender({
      key: 'k',
      storage,
      send: async (mark) => {
        sent.push(mark.id)
        return { kind: 'taken' }
      },
    })
    expect(later.read().map((queued) => queued.mark.id)).toEqual(['mark-1', 'mark-2'])
    await later.flush()
    expect(sent).toEqual(['mark-1', 'mark-2'])
    expect(later.read()).toEqual([])
    expect(later.readTaken().map((mark) => mark.id)).toEqual(['mark-1', 'mark-2'])
  })

  test('where the browser keeps nothing, memory does until the page goes', async () => {
    const broken: MarkStorage = {
      getItem: () => null,
      setItem: () => {
        throw new DOMException('full', 'QuotaExceededError')
      },
      removeItem: () => {},
    }
    let isDown = true
    const sent: string[] = []
    const sender = createMarkSender({
      key: 'k',
      storage: broken,
      send: async (mark) => {
        if (isDown) return { kind: 'unanswered' }
        sent.push(mark.id)
        return { kind: 'taken' }
      },
    })
    sender.add(draft(1))
    sender.add(draft(2))
    await sender.flush()
    isDown = false
    await sender.flush()
    expect(sent).toEqual(['mark-1', 'mark-2'])
  })

  test('a refusal is kept with its sentence and lets the next mark pass', async () => {
    const sender = createMarkSender({
      key: 'k',
      storage: memoryStorage(),
      send: async (mark) =>
        mark.id === 'mark-1' ? { kind: 'refused', sentence: 'This firing is finished.' } : { kind: 'taken' },
    })
    sender.add(draft(1))
    sender.add(draft(2))
    await sender.flush()
    expect(sender.read()).toEqual([{ mark: draft(1), tries: 1, refusal: 'This firing is finished.' }])
  })

  test('signed out, too busy or out of order is no refusal: the mark is tried again', () => {
    expect([401, 408, 429, 500, 503, 0].map(isRefusal)).toEqual([false, false, false, false, false, false])
    expect([400, 403, 404, 409, 422].map(isRefusal)).toEqual([true, true, true, true, true])
  })
})

describe('taking back and moving', () => {
  const undoing = { id: 'undo', at: at(30) }

  test('a mark that never went out is dropped by its undo', () => {
    const queue = addToQueue([], draft(1))
    expect(undoInQueue(queue, 'mark-1', undoing)).toEqual([])
  })

  test('a mark that may be with the server is undone by a mark of its own', () => {
    const tried = noteTry(addToQueue([], draft(1)), 'mark-1')
    const queue = undoInQueue(tried, 'mark-1', undoing)
    expect(queue.at(-1)?.mark).toEqual({ id: 'undo', kind: 'undone', at: at(30), replacesId: 'mark-1' })
    expect(queue).toHaveLength(2)
    expect(undoInQueue([], 'mark-1', undoing).at(-1)?.mark.replacesId).toBe('mark-1')
  })

  test('undoing a correction that waits still undoes what it corrected', () => {
    const correction: MarkDraft = { ...draft(2), replacesId: 'mark-1' }
    const queue = undoInQueue(addToQueue([], correction), 'mark-2', undoing)
    expect(queue.map((queued) => queued.mark)).toEqual([
      { id: 'mark-2', kind: 'undone', at: at(2), replacesId: 'mark-1' },
    ])
  })

  test('a minute ago changes a waiting mark in place and corrects one that went out', () => {
    const waiting = moveInQueue(addToQueue([], draft(10)), draft(10), { id: 'moved', at: at(1) })
    expect(waiting.queue.map((queued) => queued.mark)).toEqual([{ ...draft(10), at: at(1) }])
    const sent = moveInQueue([], draft(10), { id: 'moved', at: at(1) })
    expect(sent.mark).toEqual({ id: 'moved', kind: 'feed', at: at(1), replacesId: 'mark-10' })
    expect(nextToSend(sent.queue)?.mark).toEqual(sent.mark)
  })

  test('what undoes a refused mark goes with it', () => {
    const tried = noteTry(addToQueue([], draft(1)), 'mark-1')
    const queue = undoInQueue(tried, 'mark-1', undoing)
    const refused = noteResult(queue, 'mark-1', { kind: 'refused', sentence: 'no' })
    expect(refused.map((queued) => queued.mark.id)).toEqual(['mark-1'])
  })
})

describe('what is kept', () => {
  const marks = fc.record({
    id: fc.uuid(),
    kind: fc.constantFrom('feed', 'stir', 'lid on', 'stage', 'undone' as const),
    at: fc.constant(at(5)),
    words: fc.string(),
  })
  const queues: fc.Arbitrary<MarkQueue> = fc.array(
    fc.record({
      mark: marks,
      tries: fc.nat(9),
      refusal: fc.option(fc.string(), { nil: null }),
    }),
  )

  test('parse of print is identity', () => {
    fc.assert(
      fc.property(queues, (queue) => {
        expect(parseQueue(printQueue(queue))).toEqual(queue)
      }),
      fixed,
    )
  })

  test('what cannot be read is nothing, and never an error', () => {
    fc.assert(
      fc.property(fc.oneof(fc.string(), fc.json()), (text) => {
        expect(Array.isArray(parseQueue(text))).toBe(true)
      }),
      fixed,
    )
    expect(parseQueue(null)).toEqual([])
    expect(parseQueue('{"queue":[{"mark":{"id":1}}]}')).toEqual([])
  })

  test('adding one mark twice is adding it once', () => {
    const once = addToQueue([], draft(1))
    expect(addToQueue(once, draft(1))).toBe(once)
  })
})
