'use client'

import { useCallback, useState } from 'react'
import type { Touched } from './fireside-after-touch'
import type { Call } from './fireside-calls'
import type { MarkDraft } from './fireside-mark-queue'
import type { MarkSender } from './fireside-mark-sender'

type LastTouch = Touched & { mark: MarkDraft }

/** Makes marks, and holds the last one for as long as it can be taken back, moved, or given a call. */
export function useTouched(sender: MarkSender, readNowMs: () => number) {
  const [touched, setTouched] = useState<LastTouch | null>(null)

  const mark = useCallback(
    (what: Pick<MarkDraft, 'kind' | 'phase' | 'stagePosition' | 'words'>, words: string) => {
      const nowMs = readNowMs()
      const draft: MarkDraft = { id: crypto.randomUUID(), at: toIso(nowMs), ...what }
      sender.add(draft)
      setTouched({
        id: draft.id,
        mark: draft,
        words,
        atMs: nowMs,
        touchedMs: nowMs,
        minutesAgo: 0,
        isUndoable: what.kind !== 'phase',
        endedStage: what.kind === 'stage' ? (what.stagePosition ?? null) : null,
        call: null,
      })
    },
    [sender, readNowMs],
  )

  const undo = useCallback(() => {
    if (touched === null || !touched.isUndoable) return
    sender.undo(touched.id, { id: crypto.randomUUID(), at: toIso(readNowMs()) })
    setTouched(null)
  }, [sender, touched, readNowMs])

  const moveTo = useCallback(
    (minutes: number) => {
      if (touched === null) return
      const atMs = touched.touchedMs - minutes * 60_000
      const moved = sender.move(touched.mark, { id: crypto.randomUUID(), at: toIso(atMs) })
      setTouched({ ...touched, id: moved.id, mark: moved, atMs, minutesAgo: minutes })
    },
    [sender, touched],
  )

  const call = useCallback(
    (word: Call) => {
      if (touched === null || touched.endedStage === null) return
      sender.add({
        id: crypto.randomUUID(),
        kind: 'call',
        at: toIso(readNowMs()),
        call: word,
        stagePosition: touched.endedStage,
      })
      setTouched({ ...touched, call: word })
    },
    [sender, touched, readNowMs],
  )

  return { touched, mark, undo, moveTo, call }
}

function toIso(ms: number): string {
  return new Date(ms).toISOString()
}
