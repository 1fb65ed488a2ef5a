import { useCallback, useSyncExternalStore } from 'react'

/**
 * The server's clock as this browser can know it: its own clock, set right by the instants that arrive. An instant
 * arrives late by its journey, never early, so the least delayed of the recent ones is the best.
 */
export type ServerClock = {
  nowMs: () => number
  /** An instant of the server that has just arrived. */
  see: (serverMs: number) => void
}

/** A jump larger than this is a clock that was set, here or there. */
const JUMP_MS = 2_000
/** The best offset fades this much with each instant, so that a drift is followed. */
const FADE_MS = 1

export function nextOffsetMs(beforeMs: number, sampleMs: number): number {
  if (Math.abs(sampleMs - beforeMs) > JUMP_MS) return sampleMs
  return Math.max(beforeMs - FADE_MS, sampleMs)
}

export function createServerClock(serverNowMs: number, readOwn: () => number = Date.now): ServerClock {
  let offsetMs = serverNowMs - readOwn()
  return {
    nowMs: () => readOwn() + offsetMs,
    see: (serverMs) => {
      offsetMs = nextOffsetMs(offsetMs, serverMs - readOwn())
    },
  }
}

const LOOK_EVERY_MS = 100

/** The server's time in whole steps of `stepMs`; renders only when a step is over. */
export function useServerTime(clock: ServerClock, firstMs: number, stepMs = 1_000): number {
  const subscribe = useCallback((onTick: () => void) => {
    const timer = setInterval(onTick, LOOK_EVERY_MS)
    return () => clearInterval(timer)
  }, [])
  const read = useCallback(() => Math.floor(clock.nowMs() / stepMs) * stepMs, [clock, stepMs])
  const readFirst = useCallback(() => Math.floor(firstMs / stepMs) * stepMs, [firstMs, stepMs])
  return useSyncExternalStore(subscribe, read, readFirst)
}
