'use client'

import Link from 'next/link'
import { buttonClass } from '@/components/ui/button-style'
import type { PersonView } from '@/components/live/device-view'
import type { PinPersonDto } from '@/lib/devices/schema'
import { usePinSignIn } from './use-pin-sign-in'
import { WhoPanel } from './who-panel'

/** The sign-in of a shared tablet: the names, then a PIN; then on to where the person was going. */
export function WhoScreen({
  people,
  person,
  deviceName,
  siteName,
  nextPath,
}: {
  people: readonly PinPersonDto[]
  person: PersonView | null
  deviceName: string
  siteName: string
  nextPath: string
}) {
  // A whole new page, so that nothing of a former person stays in the browser.
  const { isBusy, fault, forget, signIn } = usePinSignIn(person, () => window.location.assign(nextPath))
  return (
    <div className="flex min-h-dvh flex-col px-8 py-6">
      <div className="mb-6 flex items-start justify-between gap-6">
        <div>
          <h1 className="text-[44px] leading-[1.1] font-[640]">Who is at the fire?</h1>
          <p className="mt-1 text-[22px] text-soft">
            {deviceName}, {siteName}
          </p>
        </div>
        <Link href="/room" className={buttonClass('plain')}>
          Only look at the room
        </Link>
      </div>
      <WhoPanel
        people={people}
        presentId={person?.id ?? null}
        isBusy={isBusy}
        fault={fault}
        passwordHref={`/sign-in?next=${encodeURIComponent(nextPath)}`}
        onPin={signIn}
        onChoose={forget}
      />
    </div>
  )
}
