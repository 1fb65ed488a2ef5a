'use client'

import { useMemo, useSyncExternalStore } from 'react'
import type { LiveFiringClient, LiveFiringSnapshot } from '@/components/live/live-firing-client'
import { createLiveFiringClient, firingBeforeJoin } from '@/components/live/live-firing-client'
import { createLiveStore } from '@/components/live/live-store'

export type LiveFiring = LiveFiringSnapshot & {
  /** The curves so far by role, in ring buffers that a drawing reads once a frame; null before the first join. */
  feeds: () => LiveFiringClient['feeds'] | null
}

/** Follows a firing live: newest state, curves, how the line is, and when the server was last heard. */
export function useLiveFiring(firingId: string): LiveFiring {
  const store = useMemo(
    () =>
      createLiveStore<LiveFiringSnapshot, LiveFiringClient>(firingBeforeJoin, (socket) =>
        createLiveFiringClient(socket, firingId),
      ),
    [firingId],
  )
  const snapshot = useSyncExternalStore(store.subscribe, store.snapshot, () => firingBeforeJoin)
  return useMemo(() => ({ ...snapshot, feeds: () => store.client()?.feeds ?? null }), [snapshot, store])
}
