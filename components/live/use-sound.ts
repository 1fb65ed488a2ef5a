'use client'

import { useCallback, useEffect, useRef, useSyncExternalStore } from 'react'
import type { SoundLevel, SoundPlayer } from './fireside-sound'
import { createSoundPlayer, soundLevels } from './fireside-sound'

const key = 'emberstave.sound'
const listeners = new Set<() => void>()
let now: SoundLevel | null = null
let player: SoundPlayer | null = null

function subscribe(onChange: () => void): () => void {
  listeners.add(onChange)
  return () => listeners.delete(onChange)
}

function read(): SoundLevel {
  if (now !== null) return now
  try {
    const kept = localStorage.getItem(key)
    now = soundLevels.find((level) => level === kept) ?? 'off'
  } catch {
    now = 'off'
  }
  return now
}

function thePlayer(): SoundPlayer {
  player ??= createSoundPlayer()
  return player
}

/** An unseen alarm sounds again this often. */
const ALARM_AGAIN_MS = 6_000

/** What there is to sound for: each new `act` key once, and the alarm for as long as it has not been seen. */
export type Sounding = { act: string | null; isAlarm: boolean }

/** This device's sound, off until a person turns it on; a touch on the page unlocks what was chosen before. */
export function useSound({ act, isAlarm }: Sounding): {
  level: SoundLevel
  choose: (level: SoundLevel) => void
} {
  const level = useSyncExternalStore(subscribe, read, () => 'off' as const)
  const soundedAct = useRef(act)
  useEffect(() => {
    if (level === 'off') return
    const unlock = () => thePlayer().unlock()
    window.addEventListener('pointerdown', unlock)
    window.addEventListener('keydown', unlock)
    return () => {
      window.removeEventListener('pointerdown', unlock)
      window.removeEventListener('keydown', unlock)
    }
  }, [level])
  useEffect(() => {
    if (!isAlarm || level === 'off') return
    thePlayer().play('alarm', level)
    const timer = setInterval(() => thePlayer().play('alarm', level), ALARM_AGAIN_MS)
    return () => clearInterval(timer)
  }, [isAlarm, level])
  useEffect(() => {
    if (act === soundedAct.current) return
    soundedAct.current = act
    // An alarm is the more urgent of the two.
    if (act !== null && !isAlarm) thePlayer().play('act', level)
  }, [act, isAlarm, level])
  const choose = useCallback((next: SoundLevel) => {
    now = next
    try {
      localStorage.setItem(key, next)
    } catch {
      // Kept for this page alone.
    }
    for (const listener of listeners) listener()
    thePlayer().unlock()
    // Heard at once, so that it is known how loud that is; the context needs a moment to start.
    setTimeout(() => thePlayer().play('act', next), 150)
  }, [])
  return { level, choose }
}
