'use client'

import { capitalize } from '@/lib/format'
import { useCallback, useEffect, useState } from 'react'
import { Button } from '@/components/ui/button'
import { formatInstant } from '@/lib/format'
import type { PersonView } from './device-view'
import type { QueuedMark } from './fireside-mark-queue'
import { dropKeptMark, readKeptMarks, sendKeptMarks } from './kept-marks'

const LOOK_EVERY_MS = 3_000
type Kept = QueuedMark & { firingId: string }

/**
 * Marks that this browser still has when nobody is at the fireside itself: sent here as well, each while the person who
 * made it is signed in; one that was refused stays until somebody has seen it.
 */
export function RoomKeptMarks({ person, zone }: { person: PersonView | null; zone: string }) {
  const [kept, setKept] = useState<readonly Kept[]>([])
  const look = useCallback(async () => {
    if (readKeptMarks().length > 0 && person !== null) await sendKeptMarks(person)
    const now = readKeptMarks().flatMap(({ firingId, queue }) => queue.map((one) => ({ ...one, firingId })))
    setKept((before) => (before.length === 0 && now.length === 0 ? before : now))
  }, [person])
  useEffect(() => {
    const first = setTimeout(() => void look(), 0)
    const timer = setInterval(() => void look(), LOOK_EVERY_MS)
    return () => {
      clearTimeout(first)
      clearInterval(timer)
    }
  }, [look])

  const refused = kept.find((one) => one.refusal !== null)
  const waiting = kept.filter((one) => one.refusal === null)
  if (refused !== undefined) {
    return (
      <div
        role="alert"
        className="flex items-center justify-between gap-4 bg-alarm-amber px-6 py-1 text-[26px] leading-tight font-[640] text-on-alarm"
      >
        <p>
          {capitalize(refused.mark.kind)} of {formatInstant(refused.mark.at, zone, 'time')}
          {refused.author === undefined ? '' : ` by ${refused.author.name}`} was not taken. {refused.refusal}
        </p>
        <Button
          className="border-current! bg-transparent! text-current!"
          onClick={() => {
            dropKeptMark(refused.firingId, refused.mark.id)
            void look()
          }}
        >
          Seen
        </Button>
      </div>
    )
  }
  if (waiting.length === 0) return null
  const names = [...new Set(waiting.flatMap(({ author }) => (author === undefined ? [] : [author.name])))]
  return (
    <p role="status" className="border-b border-line px-6 py-2 text-[22px] text-amber">
      {waiting.length === 1 ? 'One mark waits' : `${waiting.length} marks wait`} in this browser
      {names.length === 0 ? '' : `, of ${names.join(' and ')}`}; each goes while its person is signed in here.
    </p>
  )
}
