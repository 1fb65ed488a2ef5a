'use client'

import { useEffect, useRef, useState } from 'react'
import { BURST_MS, noKeys, settledKey, takeKey } from './fireside-keys'
import type { FiresideKey } from './fireside-keys'

/**
 * Single keys while no sheet is open and no field has the focus. Answers whether the key of the large control is
 * down.
 */
export function useFiresideKeys(
  isOn: boolean,
  onKey: (key: FiresideKey) => void,
  onScan: (text: string) => void,
): boolean {
  const [isHeld, setIsHeld] = useState(false)
  const handlers = useRef({ onKey, onScan })
  useEffect(() => {
    handlers.current = { onKey, onScan }
  }, [onKey, onScan])

  useEffect(() => {
    if (!isOn) return
    let reading = noKeys
    let timer: ReturnType<typeof setTimeout> | null = null
    const settle = () => {
      const key = settledKey(reading, performance.now())
      if (key === null) return
      reading = noKeys
      if (key !== 'e') handlers.current.onKey(key)
    }
    const onDown = (event: KeyboardEvent) => {
      if (event.ctrlKey || event.metaKey || event.altKey || event.repeat || isTyping(event.target)) return
      const step = takeKey(reading, event.key, performance.now())
      reading = step.reading
      if (timer !== null) clearTimeout(timer)
      timer = setTimeout(settle, BURST_MS + 10)
      if (step.found !== null) {
        event.preventDefault()
        handlers.current.onScan(step.found.text)
      }
      setIsHeld(reading.text.toLowerCase() === 'e')
    }
    const release = () => setIsHeld(false)
    window.addEventListener('keydown', onDown)
    window.addEventListener('keyup', release)
    window.addEventListener('blur', release)
    return () => {
      if (timer !== null) clearTimeout(timer)
      window.removeEventListener('keydown', onDown)
      window.removeEventListener('keyup', release)
      window.removeEventListener('blur', release)
    }
  }, [isOn])
  return isOn && isHeld
}

function isTyping(target: EventTarget | null): boolean {
  return (
    target instanceof HTMLInputElement ||
    target instanceof HTMLTextAreaElement ||
    target instanceof HTMLSelectElement ||
    document.querySelector('dialog[open]') !== null
  )
}
