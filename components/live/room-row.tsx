import Link from 'next/link'
import { memo } from 'react'
import { Pair } from '@/components/chart/pair'
import type { PairProps } from '@/components/chart/pair-types'
import { classNames } from '@/components/ui/class-names'
import { shownAlarmWords, splitAlarmWords } from '@/lib/alarms/alarm-words'
import { formatAge, formatFromPlan, formatNumber, toShownTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { RoomFiring } from '@/lib/live/events'
import { roundPercent } from './fireside-dose-figure'
import type { ProbeReading } from './fireside-reading'
import { clockFigures } from './fireside-step'
import { roomType } from './fireside-type'
import type { RoomTime } from './room-view'

export type RoomRowProps = {
  hearthNumber: number
  firingId: string
  serial: string
  recipeName: string
  pair: PairProps | null
  firing: RoomFiring | null
  lead: ProbeReading
  isFar: boolean
  edge: 'red' | 'amber' | null
  time: RoomTime | null
  isTight: boolean
  unit: TemperatureUnit
}

/** One hearth with a barrel over its fire; the whole row opens the fireside. */
export function RoomRow(props: RoomRowProps) {
  const { hearthNumber, firing, edge, time } = props
  const numeral = props.isTight ? roomType.numeralTight.className : roomType.numeral.className
  return (
    <Link
      href={`/fireside/${props.firingId}`}
      className={classNames(
        'relative grid min-h-0 grid-cols-[176px_minmax(0,1fr)_175px_190px_262px] items-center border-b border-line px-6 active:bg-wash',
      )}
    >
      {edge === null ? null : (
        <span
          aria-hidden="true"
          className={classNames('absolute inset-y-0 left-0 w-2', edge === 'red' ? 'bg-red' : 'bg-amber')}
        />
      )}
      <div className="min-w-0 pr-3">
        <p className={numeral}>
          <span className="sr-only">Hearth </span>
          {hearthNumber}
        </p>
        <p className={classNames(roomType.label.className, 'mt-1 truncate text-soft')}>{props.serial}</p>
        {props.isTight ? null : (
          <p className={classNames(roomType.label.className, 'truncate text-soft')}>{props.recipeName}</p>
        )}
      </div>
      <div className="flex h-full min-h-0 min-w-0 items-center py-3 pr-9">
        {props.pair === null ? null : <RoomPicture pair={props.pair} isTight={props.isTight} />}
      </div>
      <WoodCell {...props} numeral={numeral} />
      <div>
        <p className={classNames(numeral, 'whitespace-nowrap')}>
          {firing === null ? (
            '–'
          ) : (
            <Percent text={roundPercent(firing.dose.minutes / firing.dose.targetMinutes)} />
          )}
        </p>
        <p className={classNames(roomType.label.className, 'mt-1 text-soft')}>{doseWords(firing)}</p>
      </div>
      <div className="min-w-0">
        <p className={numeral}>{time === null || time.leftS === null ? '–' : clockFigures(time.leftS)}</p>
        <p
          className={classNames(roomType.words.className, 'mt-1 line-clamp-2', edge !== null && 'font-[560]')}
        >
          {firing === null || firing.alarm === null
            ? timeWords(time)
            : splitAlarmWords(shownAlarmWords(firing.alarm.words, props.unit)).headline}
        </p>
      </div>
    </Link>
  )
}

/** Drawn again only when the curve is, not with every tick of the clock. */
const RoomPicture = memo(function RoomPicture({ pair, isTight }: { pair: PairProps; isTight: boolean }) {
  return (
    <Pair {...pair} widthPx={392} heightPx={isTight ? 96 : 152} woodShare={0.3} className="h-full w-full" />
  )
})

function Percent({ text }: { text: string }) {
  return (
    <>
      {text.replace(/\D*$/, '')}
      <span className="ml-2 text-[42px]">%</span>
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

function WoodCell({ lead, firing, isFar, unit, numeral }: RoomRowProps & { numeral: string }) {
  if (lead.kind === 'none') {
    return (
      <p className="text-[40px] leading-[1] font-[640] text-amber">
        NO
        <br />
        READING
      </p>
    )
  }
  const tempC = 'tempC' in lead ? lead.tempC : null
  const isNow = lead.kind === 'live'
  return (
    <div className={classNames((!isNow || isFar) && 'text-amber')}>
      <p className={numeral}>{tempC === null ? '–' : formatNumber(toShownTemp(tempC, unit))}</p>
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
