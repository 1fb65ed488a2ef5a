'use client'

import { useState } from 'react'
import type { MarkAuthor } from '@/components/live/fireside-mark-queue'
import { sendKeptMarks } from '@/components/live/kept-marks'
import { noteTouch } from '@/components/live/use-idle'
import type { PinPersonDto } from '@/lib/devices/schema'
import { tryApi } from '@/lib/http/api-client'

const unlucky = 429

/** Signs a person in by PIN. What waits of whoever was signed in goes first, while that still counts as theirs. */
export function usePinSignIn(present: MarkAuthor | null, onDone: () => void) {
  const [isBusy, setIsBusy] = useState(false)
  const [fault, setFault] = useState<{ words: string; asksPassword: boolean } | null>(null)

  async function signIn(person: PinPersonDto, pin: string) {
    setIsBusy(true)
    setFault(null)
    if (present !== null) await sendKeptMarks(present)
    const { problem } = await tryApi('POST', '/api/device/session', { body: { accountId: person.id, pin } })
    setIsBusy(false)
    if (problem === null) {
      noteTouch()
      onDone()
      return
    }
    setFault({
      words: problem.fields['pin'] ?? problem.detail,
      // With no time to wait there is nothing to wait for.
      asksPassword: problem.status === unlucky && problem.retryAfterS === null,
    })
  }

  return {
    isBusy,
    fault,
    forget: () => setFault(null),
    signIn: (person: PinPersonDto, pin: string) => void signIn(person, pin),
  }
}
