'use client'

import { useEffect, useState } from 'react'
import { Button } from '@/components/ui/button'
import { useKeepAwake } from './use-keep-awake'

const LOOK_EVERY_MS = 10 * 60_000

/**
 * What every page of the room does in its browser: keeps the screen awake, and keeps the shell for a reload without a
 * network. A new version is said and waits for a touch; it never loads the page again by itself.
 */
export function AppKeeper() {
  useKeepAwake()
  const take = useNewVersion()
  if (take === null) return null
  return (
    <div
      role="status"
      className="fixed right-4 bottom-4 z-40 flex items-center gap-5 rounded-control border border-edge bg-raised py-2 pr-2 pl-5 text-[24px] shadow-float"
    >
      A new version is here.
      <Button kind="main" onClick={take}>
        Reload
      </Button>
    </div>
  )
}

/** Takes a new version over and loads the page again; null while there is none. */
function useNewVersion(): (() => void) | null {
  const [waiting, setWaiting] = useState<ServiceWorker | null>(null)
  useEffect(() => {
    if (process.env.NODE_ENV !== 'production' || !('serviceWorker' in navigator)) return
    let isOver = false
    let registration: ServiceWorkerRegistration | null = null
    const look = () => void registration?.update().catch(() => {})
    const watch = (worker: ServiceWorker | null) => {
      const say = () => {
        // The first one of a browser replaces nothing.
        if (!isOver && worker?.state === 'installed' && navigator.serviceWorker.controller !== null)
          setWaiting(worker)
      }
      say()
      worker?.addEventListener('statechange', say)
    }
    void navigator.serviceWorker
      .register('/sw.js', { scope: '/', updateViaCache: 'none' })
      .then((made) => {
        registration = made
        watch(made.waiting)
        made.addEventListener('updatefound', () => watch(made.installing))
      })
      .catch(() => {
        // A browser that keeps nothing (a private window) goes without.
      })
    const timer = setInterval(look, LOOK_EVERY_MS)
    window.addEventListener('online', look)
    return () => {
      isOver = true
      clearInterval(timer)
      window.removeEventListener('online', look)
    }
  }, [])
  if (waiting === null) return null
  return () => {
    navigator.serviceWorker.addEventListener('controllerchange', () => window.location.reload(), {
      once: true,
    })
    waiting.postMessage('take over')
  }
}
