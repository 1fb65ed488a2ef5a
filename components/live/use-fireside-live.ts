'use client'

import { useEffect, useRef } from 'react'
import type { ServerClock } from './fireside-clock'
import type { BeforeJoin, Connection } from './live-firing-client'
import type { LiveFiring } from './use-live-firing'
import { useLiveFiring } from './use-live-firing'

const ended = 'Your session has ended. Sign in again; marks made here are kept.'

/** The server's sentence when it lets nobody in; null while it does, or only does not answer. */
export function refusalOf(connection: Connection): string | null {
  if (connection.kind === 'ended') return ended
  if (connection.kind !== 'refused') return null
  return connection.problem.detail ?? connection.problem.title
}

/** Calls for every change that the server tells of, and after each cut, since one may have been missed. */
export function useChanges(live: { changes: number; connection: Connection }, onChanged: () => void): void {
  const changed = useRef(onChanged)
  useEffect(() => {
    changed.current = onChanged
  }, [onChanged])
  const isLive = live.connection.kind === 'live'
  useEffect(() => {
    if (isLive) changed.current()
  }, [live.changes, isLive])
}

/** Follows one firing, keeps the clock right by it, and says when the firing itself is to be fetched again. */
export function useFiresideLive(
  firingId: string,
  clock: ServerClock,
  onChanged: () => void,
  before: BeforeJoin | null = null,
): LiveFiring {
  const live = useLiveFiring(firingId, before)
  // What was kept from before says nothing of the clock now.
  const atMs = live.heardAtMs === null ? null : (live.state?.atMs ?? null)
  useEffect(() => {
    if (atMs !== null) clock.see(atMs)
  }, [clock, atMs])
  useChanges(live, onChanged)
  return live
}
