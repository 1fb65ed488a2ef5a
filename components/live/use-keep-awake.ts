'use client'

import { useEffect } from 'react'

/**
 * Keeps the screen on while the page is to be seen, where the browser can (a secure origin). The browser lets go
 * whenever the page is hidden, so it is asked again when it comes back. Refused (a low battery), it is asked again by
 * and by; the page does not depend on it.
 */
export function useKeepAwake(isOn = true): void {
  useEffect(() => {
    if (!isOn || !('wakeLock' in navigator)) return
    let held: WakeLockSentinel | null = null
    let isOver = false
    const ask = async () => {
      if (isOver || document.visibilityState !== 'visible' || (held !== null && !held.released)) return
      try {
        const lock = await navigator.wakeLock.request('screen')
        if (isOver) await lock.release()
        else held = lock
      } catch {
        // Not now; the timer asks again.
      }
    }
    const askAgain = () => void ask()
    askAgain()
    const timer = setInterval(askAgain, 30_000)
    document.addEventListener('visibilitychange', askAgain)
    return () => {
      isOver = true
      clearInterval(timer)
      document.removeEventListener('visibilitychange', askAgain)
      void held?.release()
    }
  }, [isOn])
}
