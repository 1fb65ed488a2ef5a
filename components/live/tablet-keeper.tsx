'use client'

import { tryApi } from '@/lib/http/api-client'
import type { AtTheFire } from './device-view'
import { sendKeptMarks } from './kept-marks'
import { useIdle } from './use-idle'

/**
 * At a shared tablet: signs the person out when nobody has touched it for its minutes, and goes back to the room. The
 * firing goes on, and the device stays what it is. Nobody is signed out while the server does not answer: their marks
 * could not be sent, and nobody else could sign in.
 */
export function TabletKeeper({ person, device }: AtTheFire) {
  const isShared = person !== null && device !== null
  const leftS = useIdle(isShared ? device.idleMinutes : null, async () => {
    if (person === null || !(await sendKeptMarks(person))) return false
    const { problem } = await tryApi('DELETE', '/api/session', { query: { why: 'idle' } })
    if (problem !== null && problem.status !== 401) return false
    window.location.assign('/room')
    return true
  })
  if (leftS === null || person === null) return null
  return (
    <p
      role="status"
      className="fixed inset-x-0 bottom-0 z-50 bg-alarm-amber px-6 py-4 text-[28px] leading-tight font-[640] text-on-alarm"
    >
      {person.name} is signed out in {leftS} s. Touch the screen to stay. The firing goes on.
    </p>
  )
}
