import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { SearchForm } from '@/components/ui/search-form'
import { changeQuery } from '@/components/ui/url-query'
import type { DeviceDto } from '@/lib/devices/schema'
import type { Page } from '@/lib/http/cursor'
import type { HearthDto } from '@/lib/probes/schema'
import { NewDevice } from './device-codes'
import { DeviceTable } from './device-table'
import { deviceFilters } from './device-words'

/** The list of shared tablets and wall screens, and the way to add one. */
export function DevicesView({
  page,
  hearths,
  values,
  zone,
  canWrite,
}: {
  page: Page<DeviceDto>
  hearths: readonly HearthDto[]
  values: Readonly<Record<string, string>>
  zone: string
  canWrite: boolean
}) {
  const options = hearths.map(({ id, number }) => ({ value: id, label: `Hearth ${number}` }))
  return (
    <>
      <PageHead
        title="Devices"
        sub="Shared tablets and wall screens. Toasters change at a tablet by PIN; each sets theirs under Account."
        actions={canWrite ? <NewDevice hearths={options} zone={zone} /> : undefined}
      />
      <SearchForm action="/devices" values={values} hint="Name" selects={deviceFilters} />
      <DeviceTable
        devices={page.items}
        hearths={options}
        zone={zone}
        canWrite={canWrite}
        isFiltered={Object.keys(values).length > 0}
      />
      <Pager
        nextHref={
          page.nextCursor === null ? undefined : changeQuery('/devices', values, { cursor: page.nextCursor })
        }
      />
    </>
  )
}
