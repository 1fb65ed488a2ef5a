'use client'

import { useEffect, useState, useSyncExternalStore } from 'react'
import { Button } from '@/components/ui/button'
import { formatInstant, formatTemp } from '@/lib/format'
import { FiresideConsole } from './fireside-console'
import { readPicture, readPictures } from './kept-picture'
import type { KeptPicture } from './kept-picture'
import { TabletKeeper } from './tablet-keeper'
import { browserStorage } from './use-mark-sender'

const LOOK_EVERY_MS = 5_000
const noChange = () => () => {}

/**
 * What a page of the room shows when it is loaded without a network: the last picture that this browser kept, dated,
 * never as live. A firing is followed again by itself once the server answers; the room is loaded anew then.
 */
export function OfflineShell() {
  const path = useSyncExternalStore(
    noChange,
    () => window.location.pathname,
    () => null,
  )
  if (path === null) return null
  const firingId = /^\/fireside\/([0-9a-f-]{36})$/.exec(path)?.[1]
  return firingId === undefined ? <OfflineRoom /> : <OfflineFireside firingId={firingId} />
}

function OfflineFireside({ firingId }: { firingId: string }) {
  const [{ picture, openedAtMs }] = useState(() => {
    const kept = readPicture(browserStorage(), firingId)
    return { picture: kept, openedAtMs: Date.now() + (kept?.offsetMs ?? 0) }
  })
  if (picture === null) return <OfflineRoom />
  return (
    <>
      <FiresideConsole
        firing={picture.firing}
        rules={picture.rules}
        zone={picture.zone}
        unit={picture.unit}
        canRun={picture.canRun}
        canShelve={picture.canShelve}
        person={picture.person}
        device={picture.device}
        endedHref="/room"
        serverNowMs={openedAtMs}
        kept={picture}
      />
      <TabletKeeper person={picture.person} device={picture.device} />
    </>
  )
}

/** The firings that this browser knows of, each with its last figures and their time. */
function OfflineRoom() {
  const [pictures] = useState(() => readPictures(browserStorage()))
  useBackAgain()
  return (
    <div className="flex min-h-dvh flex-col">
      <p role="alert" className="bg-alarm-amber px-6 py-4 text-[34px] leading-tight font-[640] text-on-alarm">
        No connection. Not live.
      </p>
      <div className="flex-1 px-6 py-5">
        <h1 className="text-[34px] font-[640]">Toasting room</h1>
        <p className="mt-1 text-[22px] text-soft">
          {pictures.length === 0
            ? 'This browser has kept no firing. It looks for the server every few seconds.'
            : 'What this browser last knew. It looks for the server every few seconds.'}
        </p>
        <ul className="mt-4 border-t border-line">
          {pictures.map((picture) => (
            <li key={picture.firing.id} className="border-b border-line">
              <LastKnown picture={picture} />
            </li>
          ))}
        </ul>
        <Button className="mt-6" onClick={() => window.location.reload()}>
          Try again
        </Button>
      </div>
    </div>
  )
}

function LastKnown({ picture: { firing, state, zone, unit } }: { picture: KeptPicture }) {
  return (
    // A whole load, which the kept shell answers.
    <a href={`/fireside/${firing.id}`} className="flex min-h-[104px] items-center gap-7 active:bg-wash">
      <span className="w-[96px] text-[72px] leading-none font-[640]">
        <span className="sr-only">Hearth </span>
        {firing.hearthNumber ?? '–'}
      </span>
      <span className="min-w-0 flex-1 text-[26px] leading-tight">
        <span className="block font-[640]">{firing.piece.serial}</span>
        <span className="block truncate text-soft">
          {firing.recipe.name}, {state.stage?.name ?? firing.state}
        </span>
      </span>
      <span className="text-right text-[26px] leading-tight text-amber">
        <span className="block">As of {formatInstant(state.atMs, zone, 'seconds')}. Not live.</span>
        <span className="block">
          {state.woodTempC === null ? 'no reading then' : `wood ${formatTemp(state.woodTempC, unit)} then`}
        </span>
      </span>
    </a>
  )
}

/** Loads the room anew once the server answers; nothing typed is lost by it. */
function useBackAgain(): void {
  useEffect(() => {
    const look = async () => {
      const answer = await fetch('/api/health/ready', { cache: 'no-store' }).catch(() => null)
      if (answer?.ok === true) window.location.reload()
    }
    const now = () => void look()
    const timer = setInterval(now, LOOK_EVERY_MS)
    window.addEventListener('online', now)
    return () => {
      clearInterval(timer)
      window.removeEventListener('online', now)
    }
  }, [])
}
