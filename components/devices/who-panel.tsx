'use client'

import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { classNames } from '@/components/ui/class-names'
import type { PinPersonDto } from '@/lib/devices/schema'
import { PinPad } from './pin-pad'

export type WhoPanelProps = {
  people: readonly PinPersonDto[]
  /** Who is signed in here now. */
  presentId: string | null
  isBusy: boolean
  /** Why the last PIN was not taken; `asksPassword` when only the password helps. */
  fault: { words: string; asksPassword: boolean } | null
  passwordHref: string
  onPin: (person: PinPersonDto, pin: string) => void
  /** Another name was chosen, or none: what was said of the last PIN is over. */
  onChoose: () => void
}

/** First the name, then the PIN: two touches of large targets, or the keyboard. Draws only. */
export function WhoPanel(props: WhoPanelProps) {
  const [chosen, setChosen] = useState<PinPersonDto | null>(null)
  const choose = (person: PinPersonDto | null) => {
    setChosen(person)
    props.onChoose()
  }
  if (props.people.length === 0) return <Nobody passwordHref={props.passwordHref} />
  if (chosen !== null) return <Pin key={chosen.id} {...props} person={chosen} onBack={() => choose(null)} />
  return (
    <>
      <ul className="grid grid-cols-[repeat(auto-fill,minmax(300px,1fr))] gap-3">
        {props.people.map((person) => (
          <li key={person.id}>
            <button
              type="button"
              onClick={() => choose(person)}
              aria-current={person.id === props.presentId || undefined}
              className={classNames(
                'flex min-h-[104px] w-full touch-manipulation flex-col items-start justify-center rounded-control border-3 bg-raised px-5 text-left active:bg-wash',
                person.id === props.presentId ? 'border-text' : 'border-edge',
              )}
            >
              <span className="text-[32px] leading-[1.1] font-[640]">{person.name}</span>
              <span className="text-[20px] leading-[1.2] text-soft">
                {person.id === props.presentId ? 'signed in now' : roleWords(person)}
              </span>
            </button>
          </li>
        ))}
      </ul>
      <PasswordLink href={props.passwordHref} />
    </>
  )
}

function roleWords(person: PinPersonDto): string {
  return person.isLocked ? 'PIN locked, needs the password' : person.role
}

function Pin({
  person,
  isBusy,
  fault,
  passwordHref,
  onPin,
  onBack,
}: WhoPanelProps & { person: PinPersonDto; onBack: () => void }) {
  const [figures, setFigures] = useState('')
  const enter = () => {
    onPin(person, figures)
    setFigures('')
  }
  return (
    <div className="grid grid-cols-[minmax(0,1fr)_440px] gap-8">
      <div className="flex min-w-0 flex-col">
        <p className="text-[44px] leading-[1.1] font-[640]">{person.name}</p>
        <p className="mt-1 text-[24px] text-soft">Type your PIN.</p>
        <div role="alert" className="mt-5 text-[26px] leading-[1.25]">
          {fault === null ? null : <p className="text-amber">{fault.words}</p>}
        </div>
        {fault?.asksPassword || person.isLocked ? <PasswordLink href={passwordHref} /> : null}
        <div className="mt-auto pt-6">
          <Button onClick={onBack} disabled={isBusy}>
            Another name
          </Button>
        </div>
      </div>
      <PinPad figures={figures} isBusy={isBusy} onFigures={setFigures} onEnter={enter} />
    </div>
  )
}

function PasswordLink({ href }: { href: string }) {
  return (
    <p className="mt-5 text-[22px]">
      {/* A whole new page: nothing of a former person stays in the browser. */}
      <a
        href={href}
        className="inline-flex min-h-[85px] items-center text-water underline underline-offset-4"
      >
        Sign in with the password
      </a>
    </p>
  )
}

function Nobody({ passwordHref }: { passwordHref: string }) {
  return (
    <div className="max-w-[46rem] text-[26px] leading-[1.3]">
      <p>Nobody has a PIN yet.</p>
      <p className="mt-2 text-soft">
        Whoever fires sets one under Account, at a desk or after signing in here with the password.
      </p>
      <PasswordLink href={passwordHref} />
    </div>
  )
}
