'use client'

import { useEffect, useRef } from 'react'
import { forgetPicture, keepPicture, thinCurve, withoutNames } from './kept-picture'
import type { KeptPicture } from './kept-picture'
import type { LiveFiring } from './use-live-firing'
import { browserStorage } from './use-mark-sender'

const KEEP_EVERY_MS = 10_000

export type PictureFacts = Omit<
  KeptPicture,
  'v' | 'savedAtMs' | 'offsetMs' | 'state' | 'columns' | 'curves'
> & {
  isOver: boolean
}

/** Keeps the picture of a live firing in this browser, every ten seconds and when the page is hidden or left. */
export function useKeptPicture(facts: PictureFacts, live: LiveFiring): void {
  const newest = useRef({ facts, live })
  useEffect(() => {
    newest.current = { facts, live }
  }, [facts, live])

  const { isOver } = facts
  const firingId = facts.firing.id
  useEffect(() => {
    if (isOver) {
      forgetPicture(browserStorage(), firingId)
      return
    }
    const keep = () => keepNow(newest.current.facts, newest.current.live)
    const onHidden = () => {
      if (document.visibilityState === 'hidden') keep()
    }
    const timer = setInterval(keep, KEEP_EVERY_MS)
    document.addEventListener('visibilitychange', onHidden)
    window.addEventListener('pagehide', keep)
    return () => {
      clearInterval(timer)
      document.removeEventListener('visibilitychange', onHidden)
      window.removeEventListener('pagehide', keep)
    }
  }, [firingId, isOver])
}

function keepNow({ isOver: _isOver, ...facts }: PictureFacts, live: LiveFiring): void {
  const feeds = live.feeds()
  // Only what came from the server just now is worth keeping: a cut leaves the last picture as it was.
  if (live.connection.kind !== 'live' || live.state === null || feeds === null) return
  const curveOf = (role: keyof KeptPicture['curves']) => thinCurve(feeds[role].atMs(), feeds[role].tempC())
  const { state, columns } = live
  keepPicture(browserStorage(), {
    v: 1,
    savedAtMs: state.atMs,
    offsetMs: state.atMs - (live.heardAtMs ?? Date.now()),
    ...facts,
    firing: withoutNames(facts.firing),
    state,
    columns,
    curves: { lead: curveOf('lead'), opposite: curveOf('opposite'), coals: curveOf('coals') },
  })
}
