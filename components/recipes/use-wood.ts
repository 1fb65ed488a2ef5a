'use client'

import { useEffect, useState } from 'react'
import type { PairWood } from '@/components/chart/pair-types'
import type { StaveHistoryOptions } from '@/lib/science/stave'
import type { WoodAnswer, WoodRequest } from './wood-worker'

type Waiting = (wood: PairWood | null) => void

let worker: Worker | null = null
let lastId = 0
const waiting = new Map<number, Waiting>()
/** Requests that the worker has not begun; one is under way at a time, so that a newer one overtakes. */
let queue: { request: WoodRequest; owner: symbol }[] = []
let isBusy = false

function startWorker(): Worker | null {
  if (worker !== null || typeof Worker === 'undefined') return worker
  worker = new Worker(new URL('./wood-worker.ts', import.meta.url), { type: 'module' })
  worker.onmessage = (event: MessageEvent<WoodAnswer>) => {
    waiting.get(event.data.id)?.(event.data.wood)
    waiting.delete(event.data.id)
    isBusy = false
    sendNext()
  }
  return worker
}

function sendNext(): void {
  const next = isBusy ? undefined : queue.shift()
  if (next === undefined) return
  isBusy = true
  startWorker()?.postMessage(next.request)
}

/** Asks for a picture; an older request of the same owner that was not begun is dropped. */
function requestWood(owner: symbol, options: StaveHistoryOptions, done: Waiting): void {
  if (startWorker() === null) return
  for (const dropped of queue.filter((one) => one.owner === owner)) waiting.delete(dropped.request.id)
  queue = queue.filter((one) => one.owner !== owner)
  lastId += 1
  waiting.set(lastId, done)
  queue.push({ request: { id: lastId, options }, owner })
  sendNext()
}

/**
 * The stave's picture under a plan, computed in a worker once a frame at most; the one before stays until the next is
 * there, null before the first. `options` must keep its identity while nothing changes.
 */
export function useWood(options: StaveHistoryOptions | null): PairWood | null {
  const [wood, setWood] = useState<PairWood | null>(null)
  const [owner] = useState(() => Symbol('wood'))
  useEffect(() => {
    if (options === null) return
    // An answer for a plan that has changed again is shown too: it is nearer than the one on the screen.
    const frame = requestAnimationFrame(() => requestWood(owner, options, setWood))
    return () => cancelAnimationFrame(frame)
  }, [options, owner])
  return wood
}
