'use client'

import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { classNames } from '@/components/ui/class-names'
import { shelfReasons } from '@/lib/alarms/alarm-kinds'
import { shownAlarmWords, splitAlarmWords } from '@/lib/alarms/alarm-words'
import { formatClock, formatInstant } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { ShownAlarm } from './fireside-lines'
import { FiresideSheet } from './fireside-sheet'
import type { AlarmHands } from './use-alarm-hands'

export type FiresideAlarmsProps = {
  /** Those that are on, and behind them the shelved ones. */
  alarms: readonly ShownAlarm[]
  hands: AlarmHands
  canSee: boolean
  canShelve: boolean
  /** The site's own limit, min. */
  shelveAtMostMin: number
  nowMs: number
  zone: string
  unit: TemperatureUnit
  onClose: () => void
}

/** All alarms of this firing: take note of each; shelve one as a second step, with a reason and for some minutes. */
export function FiresideAlarms(props: FiresideAlarmsProps) {
  const { alarms, hands, onClose, shelveAtMostMin, unit } = props
  const [shelvingId, setShelvingId] = useState<string | null>(null)
  const shelving = alarms.find((alarm) => alarm.id === shelvingId && alarm.state !== 'shelved')
  if (shelving !== undefined) {
    return (
      <ShelveStep
        headline={splitAlarmWords(shownAlarmWords(shelving.words, unit)).headline}
        hands={hands}
        atMostMin={shelveAtMostMin}
        onShelve={(minutes, reason) => void hands.shelve(shelving.id, minutes, reason)}
        onBack={() => setShelvingId(null)}
      />
    )
  }
  return (
    <FiresideSheet title="Alarms" onClose={onClose} isWide>
      <FormError problem={hands.problem} />
      {alarms.length === 0 ? <p className="text-soft">Nothing is wrong here.</p> : null}
      <ul>
        {alarms.map((alarm) => (
          <AlarmRow key={alarm.id} {...props} alarm={alarm} onShelve={() => setShelvingId(alarm.id)} />
        ))}
      </ul>
      <div className="mt-5 flex justify-end">
        <Button kind="main" autoFocus onClick={onClose}>
          Close
        </Button>
      </div>
    </FiresideSheet>
  )
}

function AlarmRow({
  alarm,
  hands,
  canSee,
  canShelve,
  nowMs,
  zone,
  unit,
  onShelve,
}: FiresideAlarmsProps & { alarm: ShownAlarm; onShelve: () => void }) {
  const { headline, instruction } = splitAlarmWords(shownAlarmWords(alarm.words, unit))
  const isShelved = alarm.state === 'shelved'
  return (
    <li className="flex items-center gap-4 border-b border-line py-3">
      <span
        aria-hidden="true"
        className={classNames(
          'w-2 self-stretch',
          isShelved || alarm.level === 'grey' ? 'bg-line' : alarm.level === 'red' ? 'bg-red' : 'bg-amber',
        )}
      />
      <div className="min-w-0 flex-1">
        <p className="text-[28px] leading-[1.15] font-[640]">{headline}</p>
        <p className="text-[22px] text-soft">
          {isShelved && alarm.shelvedUntilMs !== null
            ? `Shelved until ${formatInstant(alarm.shelvedUntilMs, zone, 'time')}.`
            : instruction}
        </p>
      </div>
      <span className="text-[22px] tabular-nums">{formatClock((nowMs - alarm.sinceMs) / 1000)}</span>
      {canShelve && isShelved ? (
        <Button isBusy={hands.isBusy} onClick={() => void hands.unshelve(alarm.id)}>
          Take back
        </Button>
      ) : null}
      {canShelve && !isShelved && alarm.level !== 'grey' ? <Button onClick={onShelve}>Shelve</Button> : null}
      {canSee && alarm.mayAcknowledge ? (
        <Button kind="due" onClick={() => hands.see(alarm.id)}>
          Seen
        </Button>
      ) : null}
    </li>
  )
}

const usualMinutes = [2, 5, 10, 15]

function ShelveStep({
  headline,
  hands,
  atMostMin,
  onShelve,
  onBack,
}: {
  headline: string
  hands: AlarmHands
  atMostMin: number
  onShelve: (minutes: number, reason: string) => void
  onBack: () => void
}) {
  const choices = [...usualMinutes.filter((minutes) => minutes < atMostMin), atMostMin]
  const [minutes, setMinutes] = useState(choices[Math.min(1, choices.length - 1)] ?? atMostMin)
  const [reason, setReason] = useState<string | null>(null)
  return (
    <FiresideSheet title="Shelve this alarm?" onClose={onBack} isWide>
      <FormError problem={hands.problem} />
      <p className="text-[28px] leading-[1.15] font-[640]">{headline}</p>
      <p className="mt-1 text-soft">
        It is put away and comes back by itself while it still holds. Shelving is kept with your name.
      </p>
      <Chips legend="Why" choices={shelfReasons} chosen={reason} words={(one) => one} onChoose={setReason} />
      <Chips
        legend="For"
        choices={choices}
        chosen={minutes}
        words={(one) => `${one} min`}
        onChoose={setMinutes}
      />
      <div className="mt-5 flex justify-end gap-3">
        <Button onClick={onBack}>Back</Button>
        <Button
          kind="due"
          disabled={reason === null}
          isBusy={hands.isBusy}
          onClick={() => {
            if (reason !== null) onShelve(minutes, reason)
          }}
        >
          {reason === null ? 'Choose why' : `Shelve for ${minutes} min`}
        </Button>
      </div>
    </FiresideSheet>
  )
}

function Chips<T extends string | number>({
  legend,
  choices,
  chosen,
  words,
  onChoose,
}: {
  legend: string
  choices: readonly T[]
  chosen: T | null
  words: (choice: T) => string
  onChoose: (choice: T) => void
}) {
  return (
    <fieldset className="mt-4">
      <legend className="text-soft">{legend}</legend>
      <div className="mt-1 flex flex-wrap gap-3">
        {choices.map((choice) => (
          <Button
            key={choice}
            kind={choice === chosen ? 'main' : 'plain'}
            aria-pressed={choice === chosen}
            onClick={() => onChoose(choice)}
          >
            {words(choice)}
          </Button>
        ))}
      </div>
    </fieldset>
  )
}
