import { DoseFigure } from '@/components/ui/dose-figure'
import { EmptyState } from '@/components/ui/empty-state'
import { LinkButton } from '@/components/ui/link-button'
import { Notice } from '@/components/ui/notice'
import { Pager } from '@/components/ui/pager'
import { StateText } from '@/components/ui/state-text'
import { TabLinks } from '@/components/ui/tab-links'
import { Table } from '@/components/ui/table'
import { Temperature } from '@/components/ui/temperature'
import { Time } from '@/components/ui/time'
import { changeQuery, readSort, writeSort } from '@/components/ui/url-query'
import type { Query } from '@/components/ui/url-query'
import { VerdictText } from '@/components/ui/verdict-text'
import type { Verdict } from '@/lib/science/score-types'

type Row = {
  serial: string
  at: string
  dose: number | null
  low: number
  high: number
  maxC: number | null
  verdict: Verdict | null
  state: string
}

const rows: Row[] = [
  {
    serial: 'SML-0427-P',
    at: '2031-03-14T12:41:00Z',
    dose: 15.2,
    low: 13.9,
    high: 16.6,
    maxC: 196,
    verdict: 'in tolerance',
    state: 'finished',
  },
  {
    serial: 'SML-0428-N',
    at: '2031-03-14T14:02:00Z',
    dose: 21,
    low: 19.1,
    high: 23.2,
    maxC: 204,
    verdict: 'out of tolerance',
    state: 'finished',
  },
  {
    serial: 'SML-0429-L',
    at: '2031-03-14T15:20:00Z',
    dose: 10.9,
    low: 9.8,
    high: 12.2,
    maxC: 191,
    verdict: 'cannot tell',
    state: 'finished',
  },
  {
    serial: 'SML-0430-X',
    at: '2031-03-15T08:11:00Z',
    dose: 0.19,
    low: 0.17,
    high: 0.21,
    maxC: null,
    verdict: 'incomplete',
    state: 'abandoned',
  },
  {
    serial: 'SML-0431-V-with-a-name-that-somebody-made-very-long-indeed',
    at: '2031-03-15T10:00:00Z',
    dose: 206,
    low: 180,
    high: 236,
    maxC: 231,
    verdict: 'limit broken',
    state: 'finished',
  },
  {
    serial: 'SML-0432-T',
    at: '2031-03-15T11:30:00Z',
    dose: null,
    low: 0,
    high: 0,
    maxC: 142,
    verdict: null,
    state: 'toasting',
  },
]

/** A list as every list is: tabs, sorting and pages in the URL, states and verdicts in words. */
export function TableSpecimen({ query }: { query: Query }) {
  const sort = readSort(query.sort, { key: 'at', direction: 'desc' })
  return (
    <div className="space-y-6">
      <TabLinks
        label="Firings"
        links={[
          { href: '#all', label: 'All', isCurrent: true, count: 124 },
          { href: '#mine', label: 'Mine', isCurrent: false, count: 31 },
          { href: '#wrong', label: 'To look at', isCurrent: false, count: 3 },
        ]}
      />
      <Table<Row>
        caption="Firings (invented)"
        rowKey={(row) => row.serial}
        rows={rows}
        sort={sort}
        sortHref={(next) => changeQuery('/specimens', query, { sort: writeSort(next) })}
        isRowSelected={(row) => row.serial === 'SML-0428-N'}
        columns={[
          {
            key: 'serial',
            head: 'Barrel',
            sortKey: 'serial',
            isRowHead: true,
            cell: (row) => (
              <a href="#firing" className="link">
                {row.serial}
              </a>
            ),
          },
          {
            key: 'at',
            head: 'Toast start',
            sortKey: 'at',
            cell: (row) => <Time at={row.at} zone="Europe/London" />,
          },
          {
            key: 'state',
            head: 'State',
            cell: (row) => (
              <StateText
                state={row.state}
                tone={row.state === 'abandoned' ? 'wrong' : row.state === 'toasting' ? 'normal' : 'past'}
              />
            ),
          },
          {
            key: 'max',
            head: 'Wood at most',
            unit: '°C',
            isNumeric: true,
            sortKey: 'max',
            cell: (row) => <Temperature tempC={row.maxC} unit="C" isUnitHidden />,
          },
          {
            key: 'dose',
            head: 'Dose',
            unit: 'min at 200 °C',
            isNumeric: true,
            sortKey: 'dose',
            cell: (row) => (
              <DoseFigure
                equivalentMin={row.dose}
                range={{ lowMin: row.low, highMin: row.high }}
                unit="C"
                isUnitHidden
              />
            ),
          },
          { key: 'verdict', head: 'Verdict', cell: (row) => <VerdictText verdict={row.verdict} /> },
        ]}
      />
      <Pager firstHref="#first" nextHref="#next" words="51 to 100 of 124 firings" />
      <EmptyState
        title="No firings fit this search"
        action={<LinkButton href="#clear">Clear the filters</LinkButton>}
      >
        Nothing was fired on hearth 3 in these weeks. Take a filter away, or look at all hearths.
      </EmptyState>
      <Notice tone="attention">
        Stand clear of cable and of hoops under tension. Follow local code and the responsible person.
      </Notice>
    </div>
  )
}
