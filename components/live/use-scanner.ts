'use client'

import { useEffect, useRef } from 'react'
import { isValid37_36 } from '@/lib/science/identifier'
import { noKeys, takeKey } from './fireside-keys'

/**
 * A barcode scanner that types: a fast burst of keys that Enter ends. Its Enter is taken away from whatever has the
 * focus, so that a scan never presses a button or sends a form.
 */
export function useScanner(onScan: (text: string) => void): void {
  const handler = useRef(onScan)
  useEffect(() => {
    handler.current = onScan
  }, [onScan])

  useEffect(() => {
    let reading = noKeys
    const onDown = (event: KeyboardEvent) => {
      if (event.ctrlKey || event.metaKey || event.altKey || event.repeat) return
      const step = takeKey(reading, event.key, event.timeStamp)
      reading = step.reading
      if (step.found === null) return
      event.preventDefault()
      event.stopPropagation()
      handler.current(step.found.text)
    }
    // Before anything on the page hears of it.
    window.addEventListener('keydown', onDown, { capture: true })
    return () => window.removeEventListener('keydown', onDown, { capture: true })
  }, [])
}

/**
 * The serial that was scanned, as it is written (SML-0427-P); the last part of an address counts too, since a route
 * card may carry one. Null when its check character (ISO/IEC 7064 MOD 37,36) does not fit.
 */
export function scannedSerial(text: string): string | null {
  const last = text.trim().split('/').at(-1) ?? ''
  const plain = last.replaceAll('-', '').toUpperCase()
  if (!isValid37_36(plain)) return null
  const parts = /^([A-Z]{2,5})(\d+)([0-9A-Z])$/.exec(plain)
  return parts === null ? null : parts.slice(1).join('-')
}
