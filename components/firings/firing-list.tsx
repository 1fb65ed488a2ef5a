import type { ComponentProps } from 'react'
import { FiringFilters } from '@/components/firings/firing-filters'
import { FiringTable } from '@/components/firings/firing-table'
import { Button } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import { NumbersLink } from '@/components/numbers/numbers-link'
import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { changeQuery } from '@/components/ui/url-query'
import type { FiringSummary } from '@/lib/firings/schema'
import type { TemperatureUnit } from '@/lib/format'
import type { Page } from '@/lib/http/cursor'

type Options = Omit<ComponentProps<typeof FiringFilters>, 'values'>

/** The firing list with its search, filters and way to lay curves over one another. */
export function FiringList({
  page,
  values,
  faults,
  options,
  zone,
  unit,
}: {
  page: Page<FiringSummary>
  values: Readonly<Record<string, string>>
  faults: readonly string[]
  options: Options
  zone: string
  unit: TemperatureUnit
}) {
  const href = (changes: Record<string, string | null>) => changeQuery('/firings', values, changes)
  return (
    <>
      <PageHead
        title="Firings"
        sub={<NumbersLink />}
        actions={
          <Button type="submit" form="overlay">
            Lay the ticked over one another
          </Button>
        }
      />
      <FiringFilters values={values} {...options} />
      {faults.map((fault) => (
        <Notice key={fault}>{fault}</Notice>
      ))}
      <form id="overlay" method="get" action="/firings/overlay" />
      <FiringTable firings={page.items} zone={zone} unit={unit} />
      <Pager
        firstHref={values['cursor'] === undefined ? undefined : href({ cursor: null })}
        nextHref={page.nextCursor === null ? undefined : href({ cursor: page.nextCursor })}
      />
    </>
  )
}
