import Link from 'next/link'
import type { ReactNode } from 'react'
import { classNames } from '@/components/ui/class-names'
import { shownAlarmWords, splitAlarmWords } from '@/lib/alarms/alarm-words'
import type { Sketch } from '@/lib/firings/sketch'
import { formatAge, formatFromPlan, formatNumber, toShownTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { RoomFiring } from '@/lib/live/events'
import { clockFigures, roundPercent } from './fireside-figures'
import type { ProbeReading } from './fireside-reading'
import { roomType } from './fireside-type'
import { RoomPicture } from './room-picture'
import type { RoomSize } from './room-size'
import { roomColumns, roomNumeral, roomWords } from './room-size'
import type { RoomTime } from './room-view'

export type RoomRowProps = {
  hearthNumber: number
  firingId: string
  serial: string
  recipeName: string
  sketch: Sketch | null
  firing: RoomFiring | null
  lead: ProbeReading
  isFar: boolean
  edge: 'red' | 'amber' | null
  time: RoomTime | null
  size: RoomSize
  unit: TemperatureUnit
}

/** One hearth with a barrel over its fire; the whole row opens the fireside, except on a wall screen. */
export function RoomRow(props: RoomRowProps) {
  const { hearthNumber, edge, size } = props
  const numeral = roomNumeral(size).className
  return (
    <RowFrame {...props}>
      {edge === null ? null : (
        <span
          aria-hidden="true"
          className={classNames('absolute inset-y-0 left-0 w-2', edge === 'red' ? 'bg-red' : 'bg-amber')}
        />
      )}
      <div className="min-w-0 pr-3">
        <p data-figure="room" className={numeral}>
          <span className="sr-only">Hearth </span>
          {hearthNumber}
        </p>
        <p className={classNames(roomType.label.className, 'mt-1 truncate text-soft')}>{props.serial}</p>
        {size.isTight ? null : (
          <p className={classNames(roomType.label.className, 'truncate text-soft')}>{props.recipeName}</p>
        )}
      </div>
      <div className="flex h-full min-h-0 min-w-0 items-center py-3 pr-8">
        {props.sketch === null ? null : (
          <RoomPicture sketch={props.sketch} serial={props.serial} unit={props.unit} isLow={size.isTight} />
        )}
      </div>
      <WoodCell {...props} numeral={numeral} />
      <DoseCell {...props} numeral={numeral} />
      <TimeCell {...props} numeral={numeral} />
    </RowFrame>
  )
}

function RowFrame({ firingId, size, children }: RoomRowProps & { children: ReactNode }) {
  const className = classNames(
    'relative grid min-h-0 items-center overflow-hidden border-b border-line px-6',
    roomColumns(size),
  )
  if (size.isWall) return <div className={className}>{children}</div>
  return (
    <Link href={`/fireside/${firingId}`} className={classNames(className, 'active:bg-wash')}>
      {children}
    </Link>
  )
}

type CellProps = RoomRowProps & { numeral: string }

function DoseCell({ firing, numeral }: CellProps) {
  return (
    <div>
      <p data-figure="room" className={classNames(numeral, 'whitespace-nowrap')}>
        {firing === null ? (
          '–'
        ) : (
          <Percent text={roundPercent(firing.dose.minutes / firing.dose.targetMinutes)} />
        )}
      </p>
      <p className={classNames(roomType.label.className, 'mt-1 whitespace-nowrap text-soft')}>
        {doseWords(firing)}
      </p>
    </div>
  )
}

/** What the worst alarm says stands in the place of what comes next. */
function TimeCell({ firing, time, edge, size, unit, numeral }: CellProps) {
  return (
    <div className="min-w-0">
      <p data-figure="room" className={numeral}>
        {time === null || time.leftS === null ? '–' : clockFigures(time.leftS)}
      </p>
      <p
        className={classNames(
          roomWords(size).className,
          'mt-1',
          size.isTight ? 'line-clamp-1' : 'line-clamp-2',
          edge !== null && 'font-[560]',
        )}
      >
        {firing === null || firing.alarm === null
          ? timeWords(time)
          : splitAlarmWords(shownAlarmWords(firing.alarm.words, unit)).headline}
      </p>
    </div>
  )
}

function Percent({ text }: { text: string }) {
  return (
    <>
      {text.replace(/\D*$/, '')}
      <span className="ml-1 text-[42px]">%</span>
    </>
  )
}

function doseWords(firing: RoomFiring | null): string {
  if (firing === null) return 'dose not known'
  if (firing.dose.isIncomplete) return 'incomplete, gap'
  return `dose, plan ${roundPercent(firing.dose.planMinutesNow / firing.dose.targetMinutes)}`
}

function timeWords(time: RoomTime | null): string {
  if (time === null) return 'waiting for the server'
  return time.isOver ? `over: ${time.words}` : time.words
}

function WoodCell({ lead, firing, isFar, unit, numeral }: CellProps) {
  if (lead.kind === 'none') {
    return (
      <p className="text-[44px] leading-[1] font-[640] text-amber">
        NO
        <br />
        READING
      </p>
    )
  }
  const tempC = 'tempC' in lead ? lead.tempC : null
  const isNow = lead.kind === 'live'
  return (
    <div className={classNames((lead.kind === 'old' || lead.kind === 'cut' || isFar) && 'text-amber')}>
      <p data-figure="room" className={numeral}>
        {tempC === null ? '–' : formatNumber(toShownTemp(tempC, unit))}
      </p>
      <p className={classNames(roomType.label.className, 'mt-1', isNow && !isFar && 'text-soft')}>
        {noteOf(lead, firing, unit)}
      </p>
    </div>
  )
}

function noteOf(lead: ProbeReading, firing: RoomFiring | null, unit: TemperatureUnit): string {
  if (lead.kind === 'old') return `${formatAge(lead.ageS)} old`
  if (lead.kind === 'cut') return 'no connection'
  if (lead.kind === 'live' && firing !== null && firing.planTempC !== null && firing.state === 'toasting') {
    return formatFromPlan(lead.tempC - firing.planTempC, unit)
  }
  return lead.kind === 'live' ? `wood, ${unit === 'F' ? '°F' : '°C'}` : 'no reading yet'
}
