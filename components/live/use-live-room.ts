'use client'

import { useMemo, useSyncExternalStore } from 'react'
import type { LiveRoomClient, LiveRoomSnapshot } from '@/components/live/live-room-client'
import { createLiveRoomClient, roomBeforeJoin } from '@/components/live/live-room-client'
import { createLiveStore } from '@/components/live/live-store'

/** Follows the toasting room live: every live firing in its short form, and how the line is. */
export function useLiveRoom(): LiveRoomSnapshot {
  const store = useMemo(
    () =>
      createLiveStore<LiveRoomSnapshot, LiveRoomClient>(roomBeforeJoin, (socket) =>
        createLiveRoomClient(socket),
      ),
    [],
  )
  return useSyncExternalStore(store.subscribe, store.snapshot, () => roomBeforeJoin)
}
