'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import { WhoSheet } from '@/components/devices/who-sheet'
import type { AtTheFire } from './device-view'
import { PersonLine } from './person-line'
import { useSignOut } from './use-sign-out'

/** At a shared tablet, in place of the way to the desk: who is signed in, and one touch to change that. */
export function RoomCorner({ person, device }: AtTheFire) {
  const router = useRouter()
  const [isOpen, setIsOpen] = useState(false)
  const changed = () => {
    setIsOpen(false)
    router.refresh()
  }
  const signOut = useSignOut(person, changed)
  return (
    <>
      <PersonLine person={person} device={device} waiting={[]} onChange={() => setIsOpen(true)} />
      {isOpen ? (
        <WhoSheet
          person={person}
          onSignedIn={changed}
          onSignOut={person === null ? undefined : signOut}
          onClose={() => setIsOpen(false)}
        />
      ) : null}
    </>
  )
}
