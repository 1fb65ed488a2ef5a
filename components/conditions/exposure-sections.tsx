import { TakeBackButton } from '@/components/conditions/take-back-button'
import { EmptyState } from '@/components/ui/empty-state'
import { Table } from '@/components/ui/table'
import type {
  CarbonMonoxideDay,
  DayDto,
  ExposureReadingDto,
  ExposureUploadDto,
  HeatDay,
} from '@/lib/conditions/schema'
import { alarmDecides } from '@/lib/conditions/missing-words'
import { formatCount, formatInstant, formatNumber, formatTemp, toShownTemp, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

/** Carbon monoxide and heat of a day against the site's limits, then the readings that they are made of. */
export function ExposureSections({
  day,
  unit,
  mayWrite,
}: {
  day: DayDto
  unit: TemperatureUnit
  mayWrite: boolean
}) {
  return (
    <div className="min-w-0 space-y-7">
      <CarbonMonoxide day={day} />
      <Heat day={day} unit={unit} />
      {day.byHand.length + day.uploads.length === 0 ? null : (
        <Kept day={day} unit={unit} mayWrite={mayWrite} />
      )}
    </div>
  )
}

function CarbonMonoxide({ day }: { day: DayDto }) {
  const zone = day.timeZone
  return (
    <section>
      <h2 className="mb-2">Carbon monoxide</h2>
      <Table
        caption="Carbon monoxide by who wore the meter or where it stood"
        rows={day.carbonMonoxide}
        rowKey={(one) => one.subject}
        columns={[
          { key: 'subject', head: 'Worn by, or where', isRowHead: true, cell: ({ subject }) => subject },
          {
            key: 'mean',
            head: '8-hour mean',
            unit: 'ppm',
            isNumeric: true,
            cell: (one) => (
              <span className={isOver(one, '8-hour mean') ? 'font-[640] text-red' : ''}>
                {formatNumber(one.mean8hPpm, 1)}
              </span>
            ),
          },
          {
            key: 'peak',
            head: 'Peak',
            unit: 'ppm',
            isNumeric: true,
            cell: (one) => (
              <span className={isOver(one, 'ceiling') ? 'font-[640] text-red' : ''}>
                {formatNumber(one.peakPpm)}{' '}
                <span className="text-mute">at {formatInstant(one.peakAt, zone, 'time')}</span>
              </span>
            ),
          },
          { key: 'from', head: 'Made of', cell: (one) => madeOf(one.readingCount, one.coveredH) },
          {
            key: 'latest',
            head: 'Last',
            isNumeric: true,
            cell: ({ latest }) => `${formatNumber(latest.ppm)} at ${formatInstant(latest.at, zone, 'time')}`,
          },
        ]}
        empty={
          <EmptyState title="No reading of carbon monoxide.">
            {alarmDecides} Record what a meter shows, or take its file.
          </EmptyState>
        }
      />
      {day.carbonMonoxide.flatMap((one) =>
        one.over.map((limit) => (
          <p key={`${one.subject} ${limit.name} ${limit.kind}`} className="mt-2 font-[560] text-red">
            {one.subject}: above the {limit.kind} of {formatNumber(limit.ppm)} ppm ({limit.name}).
          </p>
        )),
      )}
      <p className="mt-2 text-small text-soft">
        Limits of this site:{' '}
        {day.carbonMonoxideLimits
          .map((limit) => `${limit.kind} ${formatNumber(limit.ppm)} ppm (${limit.name}, ${limit.source})`)
          .join('; ')}
        .
      </p>
    </section>
  )
}

function isOver(one: CarbonMonoxideDay, kind: '8-hour mean' | 'ceiling'): boolean {
  return one.over.some((limit) => limit.kind === kind)
}

/** "8 readings over 5.2 h of 8; the rest counts as nothing" */
function madeOf(readingCount: number, coveredH: number): string {
  const rest = coveredH < 7.95 ? ` of 8` : ''
  return `${formatCount(readingCount, 'reading')} over ${formatNumber(coveredH, 1)}\u00a0h${rest}`
}

function Heat({ day, unit }: { day: DayDto; unit: TemperatureUnit }) {
  const zone = day.timeZone
  const { alertC, exposureC, metabolicRateW, source } = day.heatLimits
  return (
    <section>
      <h2 className="mb-2">Heat</h2>
      <Table
        caption="Wet-bulb globe temperature"
        rows={day.heat}
        rowKey={(one) => one.subject}
        columns={[
          { key: 'subject', head: 'Worn by, or where', isRowHead: true, cell: ({ subject }) => subject },
          {
            key: 'hour',
            head: 'Hottest hour, WBGT',
            unit: unitName(unit),
            isNumeric: true,
            cell: (one) => (
              <>
                {formatNumber(toShownTemp(one.hottestHourC, unit), 1)}{' '}
                <span className="text-mute">to {formatInstant(one.hottestUntil, zone, 'time')}</span>
              </>
            ),
          },
          { key: 'over', head: 'Against the limits', cell: (one) => <HeatWords one={one} /> },
          {
            key: 'from',
            head: 'Made of',
            cell: (one) =>
              `${formatCount(one.readingCount, 'reading')} over ${formatNumber(one.coveredH, 1)}\u00a0h`,
          },
          {
            key: 'latest',
            head: 'Last',
            isNumeric: true,
            cell: ({ latest }) =>
              `${formatNumber(toShownTemp(latest.wbgtC, unit), 1)} at ${formatInstant(latest.at, zone, 'time')}`,
          },
        ]}
        empty={
          <EmptyState title="No reading of heat.">
            Record the WBGT that a meter shows, or its natural wet bulb and globe.
          </EmptyState>
        }
      />
      <p className="mt-2 text-small text-soft">
        At {formatNumber(metabolicRateW)} W ({source}): not used to heat {formatTemp(alertC, unit, 1)}, used
        to it {formatTemp(exposureC, unit, 1)} WBGT.
      </p>
    </section>
  )
}

function HeatWords({ one }: { one: HeatDay }) {
  if (one.over === 'none') return <>under both</>
  return one.over === 'alert limit' ? (
    <span className="font-[560] text-amber">above that for people not used to heat</span>
  ) : (
    <span className="font-[640] text-red">above that for people used to heat</span>
  )
}

function Kept({ day, unit, mayWrite }: { day: DayDto; unit: TemperatureUnit; mayWrite: boolean }) {
  const zone = day.timeZone
  const rows = [
    ...day.byHand.map((reading) => ({ at: reading.at, reading, file: null })),
    ...day.uploads.map((file) => ({ at: file.firstAt ?? file.recordedAt, reading: null, file })),
  ].sort((a, b) => a.at.localeCompare(b.at))
  return (
    <section>
      <h2 className="mb-2">Readings of this day</h2>
      <ul className="border-t border-line">
        {rows.map(({ reading, file }) => (
          <li
            key={reading?.id ?? file?.id}
            className="flex flex-wrap items-baseline justify-between gap-x-4 border-b border-line py-[5.5px]"
          >
            <span className="min-w-0 flex-1 basis-60">
              {reading === null
                ? file === null
                  ? null
                  : fileWords(file, zone)
                : readingWords(reading, zone, unit)}
            </span>
            {!mayWrite || (reading === null && file === null) ? null : (
              <TakeBackButton
                path={
                  reading === null
                    ? `/api/exposure-files/${file?.id ?? ''}/remove`
                    : `/api/exposure-readings/${reading.id}/remove`
                }
                what={
                  reading === null
                    ? `the file ${file?.fileName ?? ''}`
                    : `the reading of ${formatInstant(reading.at, zone, 'time')}`
                }
              />
            )}
          </li>
        ))}
      </ul>
    </section>
  )
}

function readingWords(reading: ExposureReadingDto, zone: string, unit: TemperatureUnit) {
  const value =
    reading.kind === 'carbon monoxide'
      ? `${formatNumber(reading.value, reading.value % 1 === 0 ? 0 : 1)} ppm CO`
      : `WBGT ${formatTemp(reading.value, unit, 1)}`
  const parts =
    reading.wetBulbC === null || reading.globeC === null
      ? ''
      : ` (wet bulb ${formatTemp(reading.wetBulbC, unit, 1)}, globe ${formatTemp(reading.globeC, unit, 1)})`
  return (
    <>
      {formatInstant(reading.at, zone, 'time')} {value}
      {parts}, {reading.subject} <span className="text-mute">by hand, {reading.by}</span>
    </>
  )
}

function fileWords(file: ExposureUploadDto, zone: string) {
  const kind = file.kind === 'carbon monoxide' ? 'CO' : 'WBGT'
  const left = file.skippedCount === 0 ? '' : `, ${formatCount(file.skippedCount, 'line')} left out`
  const until = file.lastAt === null ? '' : ` to ${formatInstant(file.lastAt, zone, 'time')}`
  return (
    <>
      {file.firstAt === null ? '' : formatInstant(file.firstAt, zone, 'time')}
      {until} {formatCount(file.readingCount, 'reading')} of {kind}, {file.subject}{' '}
      <span className="text-mute">
        from {file.fileName}
        {left}, {file.by}
      </span>
    </>
  )
}
