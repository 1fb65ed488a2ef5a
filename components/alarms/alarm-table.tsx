import Link from 'next/link'
import { storySentence } from '@/components/alarms/alarm-story'
import { EmptyState } from '@/components/ui/empty-state'
import { LinkButton } from '@/components/ui/link-button'
import { Table } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import { alarmCatalog } from '@/lib/alarms/alarm-kinds'
import { shownAlarmWords, splitAlarmWords } from '@/lib/alarms/alarm-words'
import type { AlarmDto } from '@/lib/alarms/schema'
import type { TemperatureUnit } from '@/lib/format'

/** Alarms that came, each with what became of it. */
export function AlarmTable({
  alarms,
  zone,
  unit,
}: {
  alarms: readonly AlarmDto[]
  zone: string
  unit: TemperatureUnit
}) {
  return (
    <Table
      caption="Alarms, newest first"
      rows={alarms}
      rowKey={(alarm) => alarm.id}
      empty={
        <EmptyState title="No alarm fits." action={<LinkButton href="/alarms">Show all</LinkButton>}>
          Change the filters. Alarms are kept from each firing’s preheat to its end.
        </EmptyState>
      }
      columns={[
        {
          key: 'came',
          head: 'Came',
          isRowHead: true,
          className: 'whitespace-nowrap',
          cell: (alarm) => <Time at={alarm.cameAt} zone={zone} />,
        },
        { key: 'hearth', head: 'Hearth', isNumeric: true, cell: (alarm) => alarm.hearthNumber ?? '' },
        {
          key: 'barrel',
          head: 'Barrel',
          cell: (alarm) => (
            <Link href={`/firings/${alarm.firingId}`} className="link whitespace-nowrap">
              {alarm.serial}
            </Link>
          ),
        },
        { key: 'toaster', head: 'Toaster', cell: (alarm) => alarm.toaster?.name ?? '' },
        { key: 'kind', head: 'Alarm', cell: (alarm) => <Kind alarm={alarm} /> },
        {
          key: 'words',
          head: 'It said',
          cell: (alarm) => splitAlarmWords(shownAlarmWords(alarm.words, unit)).headline,
        },
        { key: 'story', head: 'What became of it', cell: (alarm) => storySentence(alarm) },
      ]}
    />
  )
}

/** Red and amber while it is on; over, it has no colour any more. */
function Kind({ alarm }: { alarm: AlarmDto }) {
  const { name, level } = alarmCatalog[alarm.kind]
  const isOn = alarm.overAt === null
  const colour = isOn && level === 'red' ? 'text-red' : isOn && level === 'amber' ? 'text-amber' : undefined
  return (
    <span className={colour === undefined ? 'whitespace-nowrap' : `whitespace-nowrap font-[640] ${colour}`}>
      {name}
    </span>
  )
}
