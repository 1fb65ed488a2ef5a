'use client'

import { useEffect, useRef, useState } from 'react'

/** A person is told this long before. */
export const IDLE_WARNING_S = 30
const touchedKey = 'emberstave.touched'
const events = ['pointerdown', 'keydown', 'wheel'] as const

/** How long until nobody has touched for `minutes`, s; below 0 it is over. */
export function idleLeftS(touchedMs: number, minutes: number, nowMs: number): number {
  return (touchedMs + minutes * 60_000 - nowMs) / 1000
}

/** Somebody touched this tablet, as all its pages know. */
export function noteTouch(nowMs: number = Date.now()): void {
  try {
    localStorage.setItem(touchedKey, String(nowMs))
  } catch {
    // Kept by this page alone then.
  }
}

function lastTouchMs(): number | null {
  try {
    const kept = Number(localStorage.getItem(touchedKey) ?? Number.NaN)
    return Number.isFinite(kept) ? kept : null
  } catch {
    return null
  }
}

/**
 * Calls `onIdle` once nobody has touched the screen for `minutes`; null never does. What `onIdle` answers says whether
 * it is done; else the minutes begin anew. A tablet that slept or was loaded again goes by its last touch.
 *
 * @returns whole seconds left, in the last half minute; null before
 */
export function useIdle(minutes: number | null, onIdle: () => Promise<boolean>): number | null {
  const [leftS, setLeftS] = useState<number | null>(null)
  const handler = useRef(onIdle)
  useEffect(() => {
    handler.current = onIdle
  }, [onIdle])

  useEffect(() => {
    if (minutes === null) return
    let touchedMs = lastTouchMs() ?? Date.now()
    let isAsking = false
    let isDone = false
    const touch = () => {
      touchedMs = Date.now()
      noteTouch(touchedMs)
      setLeftS(null)
    }
    const look = async () => {
      // Another tab of this tablet may have been touched.
      touchedMs = Math.max(touchedMs, lastTouchMs() ?? 0)
      const left = idleLeftS(touchedMs, minutes, Date.now())
      setLeftS(left > IDLE_WARNING_S ? null : Math.max(0, Math.ceil(left)))
      if (left > 0 || isAsking || isDone) return
      isAsking = true
      isDone = await handler.current()
      isAsking = false
      if (!isDone) touch()
    }
    const timer = setInterval(() => void look(), 1_000)
    for (const event of events) window.addEventListener(event, touch, { capture: true, passive: true })
    return () => {
      clearInterval(timer)
      for (const event of events) window.removeEventListener(event, touch, { capture: true })
    }
  }, [minutes])
  return minutes === null ? null : leftS
}
