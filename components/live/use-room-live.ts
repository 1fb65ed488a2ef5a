'use client'

import { useEffect } from 'react'
import type { ServerClock } from './fireside-clock'
import type { LiveRoomSnapshot } from './live-room-client'
import { useChanges } from './use-fireside-live'
import { useLiveRoom } from './use-live-room'

/** Follows the whole room, keeps the clock right by it, and says when hearths and queue are to be fetched again. */
export function useRoomLive(clock: ServerClock, onChanged: () => void): LiveRoomSnapshot {
  const live = useLiveRoom()
  const atMs = live.room?.atMs ?? null
  useEffect(() => {
    if (atMs !== null) clock.see(atMs)
  }, [clock, atMs])
  useChanges(live, onChanged)
  return live
}
