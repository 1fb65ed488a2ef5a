'use client'

import Link from 'next/link'
import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { buttonClass } from '@/components/ui/button-style'
import { FormError } from '@/components/ui/form-error'
import type { Problem } from '@/components/ui/problem'
import { TextArea } from '@/components/ui/text-area'
import { keyNames } from './fireside-keys'
import { FiresideSheet } from './fireside-sheet'
import type { SoundLevel } from './fireside-sound'
import { SoundChoice } from './fireside-sound-choice'

/** Something seldom done at this step: another hearth, a step left out. */
export type MoreStep = { label: string; onPress: () => void }

export type MoreProps = {
  /** The firing's page at the desk; null where a PIN does not open it. */
  deskHref: string | null
  canRun: boolean
  areKeysOn: boolean
  onKeysOn: (isOn: boolean) => void
  onTurn: () => void
  steps: readonly MoreStep[]
  soundLevel: SoundLevel
  onSoundLevel: (level: SoundLevel) => void
  onAlarms: () => void
  onAbandon: () => void
  onClose: () => void
}

/** What is seldom wanted: turn, abandon, the way back, and the keys. */
export function FiresideMore({
  deskHref,
  canRun,
  areKeysOn,
  onKeysOn,
  onTurn,
  steps,
  soundLevel,
  onSoundLevel,
  onAlarms,
  onAbandon,
  onClose,
}: MoreProps) {
  return (
    <FiresideSheet title="More" onClose={onClose}>
      <div className="grid grid-cols-2 gap-3">
        {canRun ? <Button onClick={onTurn}>Turn the barrel</Button> : null}
        {steps.map(({ label, onPress }) => (
          <Button key={label} onClick={onPress}>
            {label}
          </Button>
        ))}
        <Button onClick={onAlarms}>Alarms, and those shelved</Button>
        <Link href="/room" className={buttonClass('plain')}>
          Back to the room
        </Link>
        {deskHref === null ? null : (
          <Link href={deskHref} className={buttonClass('plain')}>
            The firing’s page, at the desk
          </Link>
        )}
        {canRun ? (
          <Button kind="danger" onClick={onAbandon}>
            Abandon this firing
          </Button>
        ) : null}
      </div>
      <SoundChoice level={soundLevel} onChoose={onSoundLevel} />
      {canRun ? (
        <>
          <h3 className="mt-6 text-large">Keys</h3>
          <dl className="mt-2 grid grid-cols-[3ch_1fr_3ch_1fr] gap-x-4 gap-y-1">
            {keyNames.map(({ key, words }) => (
              <div key={key} className="contents">
                <dt>
                  <kbd className="font-mono">{key}</kbd>
                </dt>
                <dd className="text-soft">{words}</dd>
              </div>
            ))}
          </dl>
          <p className="mt-2 text-small text-soft">
            A barcode scanner presses none of them: what it types is compared with this barrel.
          </p>
        </>
      ) : null}
      <div className="mt-5 flex justify-between gap-3">
        {canRun ? (
          <Button aria-pressed={areKeysOn} onClick={() => onKeysOn(!areKeysOn)}>
            {areKeysOn ? 'Turn keys off' : 'Turn keys on'}
          </Button>
        ) : (
          <span />
        )}
        <Button kind="main" autoFocus onClick={onClose}>
          Close
        </Button>
      </div>
    </FiresideSheet>
  )
}

/** Abandoning asks why; the firing is kept, unscored. */
export function FiresideAbandon({
  isBusy,
  problem,
  onAbandon,
  onClose,
}: {
  isBusy: boolean
  problem: Problem | null
  onAbandon: (reason: string) => void
  onClose: () => void
}) {
  const [reason, setReason] = useState('')
  const [isAsked, setIsAsked] = useState(false)
  const abandon = (event: FormEvent) => {
    event.preventDefault()
    setIsAsked(true)
    if (reason.trim().length >= 3) onAbandon(reason.trim())
  }
  const ownError = isAsked && reason.trim().length < 3 ? 'Say why in a few words.' : undefined
  return (
    <FiresideSheet title="Abandon this firing?" onClose={onClose}>
      <form method="post" onSubmit={abandon} noValidate>
        <FormError problem={problem} labels={{ reason: 'Why' }} />
        <p className="mb-3 text-soft">
          It is kept with its curve and your reason, and not scored. The barrel can be fired again.
        </p>
        <TextArea
          name="reason"
          label="Why"
          rows={3}
          maxLength={1000}
          autoFocus
          value={reason}
          onChange={(event) => setReason(event.target.value)}
          error={problem?.fields?.['reason'] ?? ownError}
        />
        <div className="mt-5 flex justify-end gap-3">
          <Button onClick={onClose} disabled={isBusy}>
            Go on firing
          </Button>
          <Button kind="danger" type="submit" isBusy={isBusy}>
            Abandon
          </Button>
        </div>
      </form>
    </FiresideSheet>
  )
}
