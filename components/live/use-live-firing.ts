'use client'

import { useMemo, useSyncExternalStore } from 'react'
import type { BeforeJoin, LiveFiringClient, LiveFiringSnapshot } from '@/components/live/live-firing-client'
import { createLiveFiringClient, firingBeforeJoin, snapshotOf } from '@/components/live/live-firing-client'
import { createLiveStore } from '@/components/live/live-store'

export type LiveFiring = LiveFiringSnapshot & {
  /** The curves so far by role, in ring buffers that a drawing reads once a frame; null before the first join. */
  feeds: () => LiveFiringClient['feeds'] | null
}

/**
 * Follows a firing live: newest state, curves, how the line is, and when the server was last heard. `before` is what
 * this browser kept of it, shown until the server answers.
 */
export function useLiveFiring(firingId: string, before: BeforeJoin | null = null): LiveFiring {
  const store = useMemo(
    () =>
      createLiveStore<LiveFiringSnapshot, LiveFiringClient>(
        before === null ? firingBeforeJoin : snapshotOf(before),
        (socket) => createLiveFiringClient(socket, firingId, Date.now, before),
      ),
    [firingId, before],
  )
  const snapshot = useSyncExternalStore(store.subscribe, store.snapshot, () => firingBeforeJoin)
  return useMemo(() => ({ ...snapshot, feeds: () => store.client()?.feeds ?? null }), [snapshot, store])
}
