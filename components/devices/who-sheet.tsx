'use client'

import useSWR from 'swr'
import type { PersonView } from '@/components/live/device-view'
import { FiresideSheet } from '@/components/live/fireside-sheet'
import { Button } from '@/components/ui/button'
import type { PinPersonDto } from '@/lib/devices/schema'
import { getApi, problemOf } from '@/lib/http/api-client'
import { usePinSignIn } from './use-pin-sign-in'
import { WhoPanel } from './who-panel'

/** Changes who marks, over a live page that goes on: fetches the names, sends the PIN. */
export function WhoSheet({
  person,
  onSignedIn,
  onSignOut,
  onClose,
}: {
  person: PersonView | null
  onSignedIn: () => void
  /** Left out with nobody signed in. */
  onSignOut: (() => void) | undefined
  onClose: () => void
}) {
  const people = useSWR('/api/device/people', getApi<{ items: PinPersonDto[] }>, { revalidateOnFocus: false })
  const { isBusy, fault, forget, signIn } = usePinSignIn(person, onSignedIn)
  return (
    <FiresideSheet title={person === null ? 'Who marks?' : `${person.name} marks`} isWide onClose={onClose}>
      {people.error === undefined ? null : (
        <p role="alert" className="mb-4 text-[24px] text-amber">
          {problemOf(people.error).detail} Changing needs the network; marks go on as they are.
        </p>
      )}
      {people.data === undefined ? (
        people.error === undefined && <p className="text-soft">Fetching the names.</p>
      ) : (
        <WhoPanel
          people={people.data.items}
          presentId={person?.id ?? null}
          isBusy={isBusy}
          fault={fault}
          passwordHref={`/sign-in?next=${encodeURIComponent(window.location.pathname)}`}
          onPin={signIn}
          onChoose={forget}
        />
      )}
      <div className="mt-5 flex justify-between gap-3">
        {onSignOut === undefined ? <span /> : <Button onClick={onSignOut}>Sign {person?.name} out</Button>}
        <Button kind="main" onClick={onClose}>
          Close
        </Button>
      </div>
    </FiresideSheet>
  )
}
