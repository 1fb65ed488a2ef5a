'use client'

import { useCallback, useEffect, useRef, useState } from 'react'
import type { KeyboardEvent, MouseEvent } from 'react'

/** Long enough not to happen by a sleeve, short enough with a fire going. */
export const PRESS_MS = 1_000
/** A press by other means (a screen reader, a switch) is asked once more for this long. */
const ASK_MS = 6_000

export type Press = {
  /** 0 to 1 while pressed. */
  progress: number
  /** A short press, or one that has no length: the button says what is wanted. */
  isAsked: boolean
  begin: () => void
  end: () => void
  handlers: {
    onPointerDown: () => void
    onPointerUp: () => void
    onPointerLeave: () => void
    onPointerCancel: () => void
    onKeyDown: (event: KeyboardEvent) => void
    onKeyUp: (event: KeyboardEvent) => void
    onBlur: () => void
    onClick: (event: MouseEvent) => void
    onContextMenu: (event: MouseEvent) => void
  }
}

/** A press of a second with its progress: by finger, by Enter or Space held, or twice by a means without length. */
export function usePress(onDone: () => void, lengthMs = PRESS_MS): Press {
  const [progress, setProgress] = useState(0)
  const [isAsked, setIsAsked] = useState(false)
  const timer = useRef<ReturnType<typeof setInterval> | null>(null)
  const askTimer = useRef<ReturnType<typeof setTimeout> | null>(null)
  const wasPressed = useRef(false)
  const done = useRef(onDone)
  useEffect(() => {
    done.current = onDone
  }, [onDone])

  const stop = useCallback(() => {
    if (timer.current !== null) clearInterval(timer.current)
    timer.current = null
    setProgress(0)
  }, [])
  const ask = useCallback((isOn: boolean) => {
    if (askTimer.current !== null) clearTimeout(askTimer.current)
    askTimer.current = isOn ? setTimeout(() => setIsAsked(false), ASK_MS) : null
    setIsAsked(isOn)
  }, [])
  useEffect(() => {
    return () => {
      if (timer.current !== null) clearInterval(timer.current)
      if (askTimer.current !== null) clearTimeout(askTimer.current)
    }
  }, [])

  const begin = useCallback(() => {
    if (timer.current !== null) return
    wasPressed.current = true
    const startMs = performance.now()
    timer.current = setInterval(() => {
      const share = (performance.now() - startMs) / lengthMs
      if (share < 1) {
        setProgress(share)
        return
      }
      stop()
      ask(false)
      done.current()
    }, 40)
  }, [ask, lengthMs, stop])
  const end = useCallback(() => {
    if (timer.current === null) return
    stop()
    ask(true)
  }, [ask, stop])

  const onClick = (event: MouseEvent) => {
    event.preventDefault()
    // A click that no press began comes from a screen reader or a switch.
    if (wasPressed.current) {
      wasPressed.current = false
      return
    }
    if (isAsked) {
      ask(false)
      done.current()
    } else ask(true)
  }
  const onKeyDown = (event: KeyboardEvent) => {
    if (event.key !== 'Enter' && event.key !== ' ') return
    event.preventDefault()
    if (!event.repeat) begin()
  }
  const onKeyUp = (event: KeyboardEvent) => {
    if (event.key !== 'Enter' && event.key !== ' ') return
    event.preventDefault()
    end()
    wasPressed.current = false
  }
  return {
    progress,
    isAsked,
    begin,
    end,
    handlers: {
      onPointerDown: begin,
      onPointerUp: end,
      onPointerLeave: end,
      onPointerCancel: end,
      onKeyDown,
      onKeyUp,
      onBlur: end,
      onClick,
      onContextMenu: (event) => event.preventDefault(),
    },
  }
}
