import Link from 'next/link'
import { UnshelveButton } from '@/components/alarms/unshelve-button'
import type { AlarmDto } from '@/lib/alarms/schema'
import { shownAlarmWords, splitAlarmWords } from '@/lib/alarms/alarm-words'
import { formatAge, formatInstant } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

/** What stands or is shelved at this moment; nothing is said when there is none. */
export function AlarmsNow({
  standing,
  shelved,
  canShelve,
  nowMs,
  zone,
  unit,
}: {
  standing: readonly AlarmDto[]
  shelved: readonly AlarmDto[]
  canShelve: boolean
  nowMs: number
  zone: string
  unit: TemperatureUnit
}) {
  if (standing.length + shelved.length === 0) return null
  const headline = (alarm: AlarmDto) => splitAlarmWords(shownAlarmWords(alarm.words, unit)).headline
  return (
    <section aria-label="Now" className="mb-6">
      <h2>Now</h2>
      <ul className="mt-1 border-t border-line">
        {standing.map((alarm) => (
          <li
            key={alarm.id}
            className="flex flex-wrap items-baseline gap-x-4 border-b border-line py-[5.5px]"
          >
            <span className="font-[640] text-amber">Standing</span>
            <span className="min-w-0 flex-1">
              <Where alarm={alarm} /> {headline(alarm)} On for{' '}
              {formatAge((nowMs - Date.parse(alarm.cameAt)) / 1000)}.
            </span>
          </li>
        ))}
        {shelved.map((alarm) => (
          <li
            key={alarm.id}
            className="flex flex-wrap items-baseline gap-x-4 border-b border-line py-[5.5px]"
          >
            <span className="font-[640]">Shelved</span>
            <span className="min-w-0 flex-1">
              <Where alarm={alarm} /> {headline(alarm)}{' '}
              {alarm.shelf === null
                ? ''
                : `Until ${formatInstant(alarm.shelf.until, zone, 'time')}, by ${alarm.shelf.by}: ${alarm.shelf.reason}.`}
            </span>
            {canShelve ? <UnshelveButton id={alarm.id} /> : null}
          </li>
        ))}
      </ul>
    </section>
  )
}

function Where({ alarm }: { alarm: AlarmDto }) {
  return (
    <>
      {alarm.hearthNumber === null ? '' : `Hearth ${alarm.hearthNumber}, `}
      <Link href={`/fireside/${alarm.firingId}`} className="link">
        {alarm.serial}
      </Link>
      .
    </>
  )
}
