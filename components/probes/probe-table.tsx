import Link from 'next/link'
import { CheckDue } from '@/components/probes/check-due'
import { hearthWords, placeWords } from '@/components/probes/place-words'
import { ChangeProbe } from '@/components/probes/probe-dialog'
import { EmptyState } from '@/components/ui/empty-state'
import { LinkButton } from '@/components/ui/link-button'
import { Table } from '@/components/ui/table'
import type { Column } from '@/components/ui/table'
import { changeQuery, readSort, writeSort } from '@/components/ui/url-query'
import { formatNumber, formatSigned, formatTemp, toShownDifference, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { ProbesPage } from '@/lib/probes/get-probes-page'
import type { ProbeDto } from '@/lib/probes/schema'

/** Probes with place, type and checks; what is overdue says so. */
export function ProbeTable({
  page,
  values,
  unit,
}: {
  page: ProbesPage
  values: Readonly<Record<string, string>>
  unit: TemperatureUnit
}) {
  const isFiltered = Object.keys(values).some((key) => key !== 'sort' && key !== 'cursor')
  return (
    <Table
      caption="Probes"
      rows={page.probes.items}
      rowKey={(probe) => probe.id}
      columns={[...columns(page, unit), ...actionColumns(page)]}
      sort={readSort(values['sort'], { key: 'no', direction: 'asc' })}
      sortHref={(sort) => changeQuery('/probes', values, { sort: writeSort(sort) })}
      empty={isFiltered ? <NoneFits /> : <NoneYet mayWrite={page.mayWrite} />}
    />
  )
}

function NoneFits() {
  return (
    <EmptyState title="No probe fits." action={<LinkButton href="/probes">Show all in use</LinkButton>}>
      Change the filters, or look among the retired ones.
    </EmptyState>
  )
}

function NoneYet({ mayWrite }: { mayWrite: boolean }) {
  return (
    <EmptyState title="No probe yet.">
      {mayWrite
        ? 'Add each thermocouple with its gateway, channel and place. The lead probe’s place must be the one that recipes are written for.'
        : 'An administrator adds the probes.'}
    </EmptyState>
  )
}

function columns(page: ProbesPage, unit: TemperatureUnit): Column<ProbeDto>[] {
  return [
    {
      key: 'name',
      head: 'Probe',
      sortKey: 'name',
      isRowHead: true,
      cell: (probe) => (
        <>
          <Link className="link font-[640]" href={`/probes/${probe.id}`}>
            {probe.name}
          </Link>
          {probe.serial === '' ? null : <span className="block text-soft">{probe.serial}</span>}
        </>
      ),
    },
    {
      key: 'hearth',
      head: 'Where',
      sortKey: 'hearth',
      cell: (probe) => (
        <>
          {hearthWords(probe.hearth?.number ?? null, probe.usualRole)}
          <span className="block text-soft">{placeWords(probe.place)}</span>
        </>
      ),
    },
    {
      key: 'type',
      head: 'Type',
      cell: (probe) => `${probe.thermocoupleType} class ${probe.iecClass}`,
    },
    {
      key: 'gateway',
      head: 'Gateway',
      cell: (probe) => (
        <>
          <Link className="link" href={`/probes/gateways/${probe.gateway.id}`}>
            {probe.gateway.name}
          </Link>
          <span className="block text-soft">channel {probe.channel}</span>
        </>
      ),
    },
    {
      key: 'checks',
      head: 'Corrected at',
      unit: `${unitName(unit)}, k = 2`,
      cell: (probe) => <Corrections probe={probe} unit={unit} />,
    },
    {
      key: 'due',
      head: 'Next check',
      sortKey: 'due',
      cell: (probe) => <CheckDue probe={probe} zone={page.timeZone} />,
    },
  ]
}

function Corrections({ probe, unit }: { probe: ProbeDto; unit: TemperatureUnit }) {
  if (probe.checks.length === 0) return <span className="text-mute">not checked</span>
  return (
    <ul>
      {probe.checks.map((check) => (
        <li key={check.id} className="whitespace-nowrap">
          <span className="inline-block w-14 text-right text-soft">
            {formatTemp(check.referenceTempC, unit)}
          </span>{' '}
          {formatSigned(toShownDifference(check.correctionC, unit), 1)}
          {' ± '}
          {formatNumber(toShownDifference(check.uncertaintyC, unit), 1)}
        </li>
      ))}
    </ul>
  )
}

function actionColumns(page: ProbesPage): Column<ProbeDto>[] {
  if (!page.mayCheck && !page.mayWrite) return []
  return [
    {
      key: 'do',
      head: <span className="sr-only">Do</span>,
      cell: (probe) =>
        probe.retiredAt !== null ? (
          <span className="text-mute">retired</span>
        ) : (
          <span className="flex justify-end gap-4">
            {page.mayCheck && probe.usualRole !== 'coals' ? (
              <LinkButton kind="quiet" href={`/probes/${probe.id}/check`}>
                Check<span className="sr-only"> {probe.name}</span>
              </LinkButton>
            ) : null}
            {page.mayWrite ? <ChangeProbe probe={probe} choices={page} /> : null}
          </span>
        ),
    },
  ]
}
