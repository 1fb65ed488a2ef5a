import { AirTable } from '@/components/conditions/air-table'
import { DayNavigation } from '@/components/conditions/day-navigation'
import { DayTable } from '@/components/conditions/day-table'
import { ExposureFileButton } from '@/components/conditions/exposure-file-dialog'
import { ExposureSections } from '@/components/conditions/exposure-sections'
import { FiringAirTable } from '@/components/conditions/firing-air-table'
import { RecordAirButton } from '@/components/conditions/record-air-dialog'
import { RecordExposureButton } from '@/components/conditions/record-exposure-dialog'
import { followLocalCode } from '@/components/live/fireside-cautions'
import { Notice } from '@/components/ui/notice'
import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { changeQuery, nextPageHref } from '@/components/ui/url-query'
import type { DayDto, DayLine } from '@/lib/conditions/schema'
import { formatInstant } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { Page } from '@/lib/http/cursor'

export type ConditionsViewProps = {
  day: DayDto
  days: Page<DayLine>
  values: Readonly<Record<string, string>>
  faults: readonly string[]
  unit: TemperatureUnit
  mayWrite: boolean
  nowMs: number
}

/** One day of the room, what of it is kept and what is missing; under it the days before. */
export function ConditionsView({ day, days, values, faults, unit, mayWrite, nowMs }: ConditionsViewProps) {
  const zone = day.timeZone
  const write = { day: day.day, isToday: day.isToday, zone, nowMs }
  return (
    <>
      <PageHead
        title="Conditions"
        aside={day.isToday ? 'today' : undefined}
        sub={`${dayWords(day.day)}. Air of room and yard, carbon monoxide and heat, kept beside each firing and never inside its score. Times in ${zone}.`}
        verdict={<Standing day={day} />}
        actions={
          mayWrite ? (
            <>
              <ExposureFileButton zone={zone} />
              <RecordExposureButton {...write} unit={unit} />
              <RecordAirButton {...write} unit={unit} />
            </>
          ) : undefined
        }
      />
      {faults.map((fault) => (
        <Notice key={fault} tone="attention" className="mb-3">
          {fault}
        </Notice>
      ))}
      <DayNavigation day={day.day} isToday={day.isToday} today={formatInstant(nowMs, zone, 'day')} />
      <Notice className="mt-4 mb-5">
        A record and a reminder. The carbon monoxide alarm that is worn decides: it is the order to leave, and
        an 8-hour mean is no alarm. In heat: water, breaks, the limits below. {followLocalCode}
      </Notice>
      {day.missing.length === 0 ? null : (
        <Notice tone={day.isToday ? 'attention' : 'plain'} className="mb-5">
          {day.missing.join(' ')}
        </Notice>
      )}
      <div className="grid gap-x-9 gap-y-7 xl:grid-cols-2">
        <div className="min-w-0 space-y-7">
          <AirTable readings={day.air} zone={zone} unit={unit} mayWrite={mayWrite} />
          <FiringAirTable firings={day.firings} zone={zone} unit={unit} isToday={day.isToday} />
        </div>
        <ExposureSections day={day} unit={unit} mayWrite={mayWrite} />
      </div>
      <section className="mt-9">
        <h2 className="mb-2">Days</h2>
        <DayTable days={days.items} shown={day.day} unit={unit} />
        <Pager
          firstHref={
            values['cursor'] === undefined ? undefined : changeQuery('/conditions', values, { cursor: null })
          }
          nextHref={nextPageHref('/conditions', values, days.nextCursor)}
        />
      </section>
    </>
  )
}

function Standing({ day }: { day: DayDto }) {
  const isOver =
    day.carbonMonoxide.some((one) => one.over.length > 0) || day.heat.some((one) => one.over !== 'none')
  if (isOver) return <strong className="text-red">A limit was passed</strong>
  if (day.missing.length > 0 && day.isToday) return <span className="text-amber">Not all is kept yet</span>
  return null
}

/** "14 March 2027" of a day that is no instant. */
export function dayWords(day: string): string {
  return formatInstant(`${day}T12:00:00Z`, 'UTC', 'date')
}
