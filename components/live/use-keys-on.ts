'use client'

import { useCallback, useSyncExternalStore } from 'react'

const key = 'emberstave.keys'
const listeners = new Set<() => void>()
let isOff = false

function subscribe(onChange: () => void): () => void {
  listeners.add(onChange)
  return () => listeners.delete(onChange)
}

/** Single keys can be turned off (WCAG 2.1.4); kept by this browser where it keeps anything. */
export function useKeysOn(): [boolean, (isOn: boolean) => void] {
  const isOn = useSyncExternalStore(subscribe, read, () => true)
  const set = useCallback((next: boolean) => {
    isOff = !next
    try {
      if (next) localStorage.removeItem(key)
      else localStorage.setItem(key, 'off')
    } catch {
      // Kept for this page alone.
    }
    for (const listener of listeners) listener()
  }, [])
  return [isOn, set]
}

function read(): boolean {
  try {
    return !isOff && localStorage.getItem(key) !== 'off'
  } catch {
    return !isOff
  }
}
