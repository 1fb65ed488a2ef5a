'use client'

import { useEffect, useRef, useState } from 'react'
import { BURST_MS, noKeys, settledKey, takeKey } from './fireside-keys'
import type { FiresideKey } from './fireside-keys'

/**
 * Single keys while no sheet is open and no field has the focus; a scanner's burst presses none ({@link useScanner}
 * takes it). Answers whether the key of the large control is down.
 */
export function useFiresideKeys(isOn: boolean, onKey: (key: FiresideKey) => void): boolean {
  const [isHeld, setIsHeld] = useState(false)
  const handler = useRef(onKey)
  useEffect(() => {
    handler.current = onKey
  }, [onKey])

  useEffect(() => {
    if (!isOn) return
    let reading = noKeys
    let timer: ReturnType<typeof setTimeout> | null = null
    const settle = () => {
      const key = settledKey(reading, performance.now())
      if (key === null) return
      reading = noKeys
      if (key !== 'e') handler.current(key)
    }
    const onDown = (event: KeyboardEvent) => {
      if (event.ctrlKey || event.metaKey || event.altKey || event.repeat || isTyping(event.target)) return
      reading = takeKey(reading, event.key, performance.now()).reading
      if (timer !== null) clearTimeout(timer)
      timer = setTimeout(settle, BURST_MS + 10)
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
