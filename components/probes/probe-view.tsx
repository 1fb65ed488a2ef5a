import { CheckDue } from '@/components/probes/check-due'
import { CheckTable } from '@/components/probes/check-table'
import { CorrectionPicture } from '@/components/probes/correction-picture'
import { PlaceTable } from '@/components/probes/place-table'
import { hearthWords, placeWords } from '@/components/probes/place-words'
import { ChangeProbe } from '@/components/probes/probe-dialog'
import { ProbeFiringTable } from '@/components/probes/probe-firing-table'
import { RetireButton } from '@/components/probes/retire-button'
import { RoomTabs } from '@/components/probes/room-tabs'
import { LinkButton } from '@/components/ui/link-button'
import { Notice } from '@/components/ui/notice'
import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { Time } from '@/components/ui/time'
import { changeQuery, nextPageHref } from '@/components/ui/url-query'
import type { TemperatureUnit } from '@/lib/format'
import type { ProbePage } from '@/lib/probes/get-probe-page'
import { shownSentence } from '@/lib/recipes/shown-sentence'

/** One probe: where it is and was, its checks and correction, the firings that it read. */
export function ProbeView({
  page,
  values,
  unit,
}: {
  page: ProbePage
  values: Readonly<Record<string, string>>
  unit: TemperatureUnit
}) {
  const { probe, firings, timeZone, nowMs } = page
  const href = `/probes/${probe.id}`
  return (
    <>
      <PageHead
        title={probe.name}
        aside={probe.retiredAt === null ? 'probe' : 'retired probe'}
        sub={<Sub page={page} />}
        verdict={probe.retiredAt === null ? <CheckDue probe={probe} zone={timeZone} /> : undefined}
        verdictSub={
          probe.retiredAt === null && probe.checkState !== 'not asked' ? 'next check due' : undefined
        }
        actions={probe.retiredAt === null ? <Actions page={page} /> : undefined}
      />
      <RoomTabs current="probes" />
      <div className="space-y-8">
        {probe.retiredAt === null && probe.usualRole === 'lead' ? (
          <LeadFaults faults={probe.leadFaults.map((fault) => shownSentence('', fault, unit))} />
        ) : null}
        <section>
          <h2 className="mb-2">Correction</h2>
          <CorrectionPicture checks={probe.allChecks} nowMs={nowMs} zone={timeZone} unit={unit} />
          <div className="mt-4">
            <CheckTable checks={probe.allChecks} zone={timeZone} unit={unit} />
          </div>
        </section>
        <section>
          <h2 className="mb-2">Where it was</h2>
          <PlaceTable places={probe.places} zone={timeZone} />
        </section>
        <section>
          <h2 className="mb-2">Firings that it read</h2>
          <ProbeFiringTable firings={firings.items} zone={timeZone} />
          <Pager
            firstHref={
              values['cursor'] === undefined ? undefined : changeQuery(href, values, { cursor: null })
            }
            nextHref={nextPageHref(href, values, firings.nextCursor)}
          />
        </section>
      </div>
    </>
  )
}

function Sub({ page: { probe, timeZone } }: { page: ProbePage }) {
  const serial = probe.serial === '' ? '' : `, serial ${probe.serial}`
  return (
    <>
      <p>
        {hearthWords(probe.hearth?.number ?? null, probe.usualRole)}, {placeWords(probe.place)}
      </p>
      <p>
        Type {probe.thermocoupleType}, class {probe.iecClass}
        {serial}. {probe.gateway.name}, channel {probe.channel}.
      </p>
      {probe.isReading ? (
        <p>It reads a firing now: it is not moved or retired until that has ended.</p>
      ) : null}
      {probe.retiredAt === null ? null : (
        <p>
          Retired <Time at={probe.retiredAt} zone={timeZone} />. It stays in its firings.
        </p>
      )}
    </>
  )
}

function LeadFaults({ faults }: { faults: readonly string[] }) {
  if (faults.length === 0) return null
  return (
    <Notice tone="attention">
      {faults.map((fault) => (
        <p key={fault}>{fault}</p>
      ))}
      <p className="text-soft">Until then a firing under it starts with a signed override only.</p>
    </Notice>
  )
}

function Actions({ page }: { page: ProbePage }) {
  const { probe } = page
  return (
    <>
      {page.mayWrite ? (
        <>
          <RetireButton name={probe.name} path={`/api/probes/${probe.id}/retire`}>
            It stays in every firing that it read. Its channel is free at once, and readings that still come
            from it are refused. This cannot be undone.
          </RetireButton>
          <ChangeProbe probe={probe} choices={page} kind="plain" />
        </>
      ) : null}
      {page.mayCheck && probe.usualRole !== 'coals' ? (
        <LinkButton kind="main" href={`/probes/${probe.id}/check`}>
          Check it
        </LinkButton>
      ) : null}
    </>
  )
}
