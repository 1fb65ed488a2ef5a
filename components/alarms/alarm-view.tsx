import type { ComponentProps } from 'react'
import { AlarmFilterForm } from '@/components/alarms/alarm-filter-form'
import { AlarmRates } from '@/components/alarms/alarm-rates'
import { AlarmReasons } from '@/components/alarms/alarm-reasons'
import { AlarmsNow } from '@/components/alarms/alarms-now'
import { AlarmTable } from '@/components/alarms/alarm-table'
import { DownloadLink } from '@/components/ui/download-link'
import { Notice } from '@/components/ui/notice'
import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { changeQuery } from '@/components/ui/url-query'
import type { AlarmDto, AlarmRatesDto } from '@/lib/alarms/schema'
import type { TemperatureUnit } from '@/lib/format'
import type { Page } from '@/lib/http/cursor'

type Options = Omit<ComponentProps<typeof AlarmFilterForm>, 'values'>

export type AlarmViewProps = {
  page: Page<AlarmDto>
  rates: AlarmRatesDto
  values: Readonly<Record<string, string>>
  faults: readonly string[]
  options: Options
  /** A toaster sees those of their own firings. */
  isOwnOnly: boolean
  canShelve: boolean
  nowMs: number
  zone: string
  unit: TemperatureUnit
}

/** Alarms: what stands now, how often they came and which, and all of them. */
export function AlarmView(props: AlarmViewProps) {
  const { page, rates, values, zone, unit } = props
  const href = (changes: Record<string, string | null>) => changeQuery('/alarms', values, changes)
  return (
    <>
      <PageHead
        title="Alarms"
        sub={
          props.isOwnOnly
            ? 'Those of your own firings, each with what became of it.'
            : 'What came at the hearths, who saw it, and how often. Every move is kept.'
        }
        actions={<DownloadLink href={csvHref(values)}>Download as CSV</DownloadLink>}
      />
      <AlarmFilterForm values={values} {...props.options} />
      {props.faults.map((fault) => (
        <Notice key={fault}>{fault}</Notice>
      ))}
      <AlarmsNow
        standing={rates.standing}
        shelved={rates.shelved}
        canShelve={props.canShelve}
        nowMs={props.nowMs}
        zone={zone}
        unit={unit}
      />
      <AlarmRates rates={rates} zone={zone} />
      <h2 className="mb-1">All of them</h2>
      <AlarmTable alarms={page.items} zone={zone} unit={unit} />
      <Pager
        firstHref={values['cursor'] === undefined ? undefined : href({ cursor: null })}
        nextHref={page.nextCursor === null ? undefined : href({ cursor: page.nextCursor })}
      />
      <AlarmReasons />
    </>
  )
}

function csvHref(values: Readonly<Record<string, string>>): string {
  return changeQuery('/api/alarms.csv', values, { cursor: null, limit: null })
}
