'use client'

import { useSyncExternalStore } from 'react'
import { PANEL } from './fireside-type'

/**
 * How much larger than the stated panel this screen is, so that a wall screen fills itself with the same drawing
 * whatever its pixels: the smaller of the two ratios, never below 1.
 */
export function useWallZoom(): number {
  return useSyncExternalStore(subscribe, read, () => 1)
}

function subscribe(onChange: () => void): () => void {
  window.addEventListener('resize', onChange)
  return () => window.removeEventListener('resize', onChange)
}

function read(): number {
  return Math.max(1, Math.min(window.innerWidth / PANEL.widthPx, window.innerHeight / PANEL.heightPx))
}
