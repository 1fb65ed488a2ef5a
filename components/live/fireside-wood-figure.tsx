import { formatClimb, formatFromPlan, formatInstant, formatNumber, toShownTemp, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { classNames } from '@/components/ui/class-names'
import { readingNote } from './fireside-reading'
import type { ProbeReading } from './fireside-reading'
import { firesideType } from './fireside-type'

/** The wood's temperature, or NO READING in its place; against the plan, and how fast it climbs. */
export function WoodFigure({
  depthMm,
  lead,
  opposite,
  planTempC,
  climbCPerMin,
  isOverMaximum = false,
  isFar,
  unit,
  zone,
}: {
  depthMm: number
  lead: ProbeReading
  opposite: ProbeReading
  /** Null outside the plan. */
  planTempC: number | null
  climbCPerMin: number | null
  /** The wood-maximum alarm is on: the figure takes its red. */
  isOverMaximum?: boolean
  isFar: boolean
  unit: TemperatureUnit
  zone: string
}) {
  return (
    <div className="min-w-0 border-r border-line py-3 pr-5 pl-6">
      <p className={classNames(firesideType.label.className, 'flex justify-between gap-3 text-soft')}>
        <span>
          {depthMm === 0 ? 'Face' : `Wood at ${depthMm} mm`}, {unitName(unit)}
        </span>
        <OppositeWords reading={opposite} unit={unit} />
      </p>
      {lead.kind === 'none' ? (
        <NoReading note={readingNote(lead)} />
      ) : (
        <div className="mt-4 flex items-end justify-between gap-2">
          <p
            data-figure="wood temperature"
            className={classNames(
              firesideType.numeral.className,
              'shrink-0',
              isOverMaximum && lead.kind === 'live'
                ? 'text-red'
                : (lead.kind === 'old' || lead.kind === 'cut' || isFar) && 'text-amber',
            )}
          >
            {numeralOf(lead, unit)}
          </p>
          <p className="min-w-0 text-right text-[22px] leading-[1.2]">
            {lead.kind === 'live' ? (
              <>
                {planTempC === null ? null : (
                  <span className={classNames('block font-[640]', isFar && 'text-amber')}>
                    {formatFromPlan(lead.tempC - planTempC, unit)}
                  </span>
                )}
                <span className="block whitespace-nowrap">
                  {climbCPerMin === null ? 'climb not known' : formatClimb(climbCPerMin, unit)}
                </span>
              </>
            ) : (
              <span className="block font-[640] text-amber">{notNowWords(lead, zone)}</span>
            )}
          </p>
        </div>
      )}
    </div>
  )
}

export function NoReading({ note }: { note: string | null }) {
  return (
    <div className="mt-1 flex items-end justify-between gap-3">
      <p data-figure="no reading" className={classNames(firesideType.action.className, 'text-amber')}>
        NO
        <br />
        READING
      </p>
      {note === null ? null : (
        <p className={classNames(firesideType.small.className, 'pb-2 text-right text-amber')}>{note}</p>
      )}
    </div>
  )
}

function numeralOf(reading: ProbeReading, unit: TemperatureUnit): string {
  const tempC = 'tempC' in reading ? reading.tempC : null
  return tempC === null ? '–' : formatNumber(toShownTemp(tempC, unit))
}

function notNowWords(reading: ProbeReading, zone: string): string {
  if (reading.kind === 'cut') return `as at ${formatInstant(reading.atMs, zone, 'seconds')}`
  if (reading.kind === 'absent') return 'no lead probe'
  return readingNote(reading) ?? 'waiting for the first reading'
}

function OppositeWords({ reading, unit }: { reading: ProbeReading; unit: TemperatureUnit }) {
  if (reading.kind === 'live') return <span>opposite {formatNumber(toShownTemp(reading.tempC, unit))}</span>
  if (reading.kind === 'none') return <span className="text-amber">opposite NO READING</span>
  if (reading.kind === 'old') return <span className="text-amber">opposite {readingNote(reading)}</span>
  return null
}
