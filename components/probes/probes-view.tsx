import { NewProbe } from '@/components/probes/probe-dialog'
import { ProbeTable } from '@/components/probes/probe-table'
import { RoomTabs } from '@/components/probes/room-tabs'
import { Notice } from '@/components/ui/notice'
import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { SearchForm } from '@/components/ui/search-form'
import { changeQuery, nextPageHref } from '@/components/ui/url-query'
import { formatCount } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { ProbesPage } from '@/lib/probes/get-probes-page'
import { usualRoles } from '@/lib/probes/schema'

const any = { value: '', label: 'Any' }

/** What reads the wood and the coals, with what is out of date first said. */
export function ProbesView({
  page,
  values,
  faults,
  unit,
}: {
  page: ProbesPage
  values: Readonly<Record<string, string>>
  faults: readonly string[]
  unit: TemperatureUnit
}) {
  const hearths = page.hearths.map(({ id, number }) => ({ value: id, label: String(number) }))
  return (
    <>
      <PageHead
        title="Probes"
        sub={`What reads the room. Times in ${page.timeZone}.`}
        verdict={
          page.overdueCount === 0 ? undefined : (
            <span className="text-amber">{formatCount(page.overdueCount, 'check')} overdue</span>
          )
        }
        actions={page.mayWrite ? <NewProbe choices={page} /> : undefined}
      />
      <RoomTabs current="probes" />
      <SearchForm
        action="/probes"
        values={values}
        hint="Name, serial, gateway"
        selects={[
          { name: 'hearthId', label: 'Hearth', options: [any, ...hearths], fallback: '' },
          {
            name: 'role',
            label: 'Role',
            options: [any, ...usualRoles.map((role) => ({ value: role, label: role }))],
            fallback: '',
          },
          {
            name: 'due',
            label: 'Checks',
            options: [
              any,
              { value: 'overdue', label: 'overdue or never' },
              { value: 'soon', label: 'due soon' },
            ],
            fallback: '',
          },
          {
            name: 'state',
            label: 'State',
            options: [
              { value: '', label: 'in use' },
              { value: 'retired', label: 'retired' },
              { value: 'all', label: 'all' },
            ],
            fallback: '',
          },
        ]}
      />
      {faults.map((fault) => (
        <Notice key={fault} className="mb-3">
          {fault}
        </Notice>
      ))}
      <ProbeTable page={page} values={values} unit={unit} />
      <Pager
        firstHref={
          values['cursor'] === undefined ? undefined : changeQuery('/probes', values, { cursor: null })
        }
        nextHref={nextPageHref('/probes', values, page.probes.nextCursor)}
      />
    </>
  )
}
