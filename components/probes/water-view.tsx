import { RoomTabs } from '@/components/probes/room-tabs'
import { WaterTable } from '@/components/probes/water-table'
import { FormDialog } from '@/components/ui/form-dialog'
import { Notice } from '@/components/ui/notice'
import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { changeQuery, nextPageHref } from '@/components/ui/url-query'
import { formatCount, formatNumber } from '@/lib/format'
import type { Page } from '@/lib/http/cursor'
import type { WaterCheckDto } from '@/lib/probes/schema'
import type { SiteRules } from '@/lib/science/site-rules'

/** Preheat, leak-test and humidifier water: the newest check of each source, then all of them. */
export function WaterView({
  sources,
  page,
  values,
  rules,
  zone,
  mayCheck,
}: {
  sources: readonly WaterCheckDto[]
  page: Page<WaterCheckDto>
  values: Readonly<Record<string, string>>
  rules: SiteRules['checks']
  zone: string
  mayCheck: boolean
}) {
  const bad = sources.filter((check) => !check.isInDate || check.overLimit !== null)
  return (
    <>
      <PageHead
        title="Water"
        sub={
          `Preheat, leak-test and humidifier water. Limits of this site: TCA ` +
          `${formatNumber(rules.waterTcaMaxNgPerL, 2)} ng/L, free chlorine ` +
          `${formatNumber(rules.waterFreeChlorineMaxMgPerL, 3)} mg/L.`
        }
        verdict={
          bad.length === 0 ? undefined : (
            <span className="text-amber">{formatCount(bad.length, 'source')} not to be used</span>
          )
        }
        actions={mayCheck ? <NewWaterCheck rules={rules} /> : undefined}
      />
      <RoomTabs current="water" />
      {bad.length === 0 ? null : (
        <Notice tone="attention" className="mb-4">
          A firing that takes such water starts with a signed override only.
        </Notice>
      )}
      <section>
        <h2 className="mb-2">Each source now</h2>
        <WaterTable caption="Newest check of each source" checks={sources} zone={zone} mayCheck={mayCheck} />
      </section>
      {page.items.length === 0 ? null : (
        <section className="mt-8">
          <h2 className="mb-2">All checks</h2>
          <WaterTable caption="Water checks" checks={page.items} zone={zone} mayCheck={mayCheck} />
          <Pager
            firstHref={
              values['cursor'] === undefined
                ? undefined
                : changeQuery('/probes/water', values, { cursor: null })
            }
            nextHref={nextPageHref('/probes/water', values, page.nextCursor)}
          />
        </section>
      )}
    </>
  )
}

function NewWaterCheck({ rules }: { rules: SiteRules['checks'] }) {
  return (
    <FormDialog
      openLabel="Record a water check"
      title="Record a water check"
      submitLabel="Record"
      method="POST"
      path="/api/water-checks"
      fields={[
        {
          name: 'source',
          label: 'Source',
          kind: 'text',
          hint: 'Mains, well, tank: as the room calls it. The newest check of each source counts.',
        },
        {
          name: 'tcaNgPerL',
          label: 'TCA',
          kind: 'number',
          unit: 'ng/L',
          hint: `Above ${formatNumber(rules.waterTcaMaxNgPerL, 2)} it is not used.`,
        },
        {
          name: 'freeChlorineMgPerL',
          label: 'Free chlorine',
          kind: 'number',
          unit: 'mg/L',
          hint: `Above ${formatNumber(rules.waterFreeChlorineMaxMgPerL, 3)} it is not used.`,
        },
        {
          name: 'checkedAt',
          label: 'Checked on',
          kind: 'date',
          isLeftOutWhenEmpty: true,
          hint: 'Left empty: now.',
        },
        {
          name: 'dueAt',
          label: 'Due again on',
          kind: 'date',
          isLeftOutWhenEmpty: true,
          hint: `Left empty: ${formatNumber(rules.waterMonths, rules.waterMonths % 1 === 0 ? 0 : 1)} months after.`,
        },
      ]}
    />
  )
}
