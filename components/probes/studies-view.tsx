import Link from 'next/link'
import { doseShareWords, halfWidthWords, log10Words } from '@/components/probes/half-width-words'
import { hearthWords, placeWords } from '@/components/probes/place-words'
import { RoomTabs } from '@/components/probes/room-tabs'
import { EmptyState } from '@/components/ui/empty-state'
import { Facts } from '@/components/ui/facts'
import { FormDialog } from '@/components/ui/form-dialog'
import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { StateText } from '@/components/ui/state-text'
import { Table } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import { changeQuery, nextPageHref } from '@/components/ui/url-query'
import { formatCount, formatNumber } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { StudiesPage } from '@/lib/probes/get-studies-page'
import type { StudyDto } from '@/lib/probes/study-schema'

const href = '/probes/repeatability'

/** What this room can judge: the figure in force, what follows from it, and the studies behind it. */
export function StudiesView({
  page,
  values,
  unit,
}: {
  page: StudiesPage
  values: Readonly<Record<string, string>>
  unit: TemperatureUnit
}) {
  return (
    <>
      <PageHead
        title="What this room can judge"
        sub="A probe that is taken out and put back never sits quite as before. How far apart its readings fall says how small a difference in dose this room can tell."
        actions={page.mayCheck ? <NewStudy page={page} /> : undefined}
      />
      <RoomTabs current="repeatability" />
      <div className="space-y-8">
        <section className="max-w-[46rem]">
          <h2 className="mb-1">In force now</h2>
          <InForce page={page} unit={unit} />
        </section>
        <section>
          <h2 className="mb-2">Studies</h2>
          <StudyTable page={page} unit={unit} />
          <Pager
            firstHref={
              values['cursor'] === undefined ? undefined : changeQuery(href, values, { cursor: null })
            }
            nextHref={nextPageHref(href, values, page.studies.nextCursor)}
          />
        </section>
      </div>
    </>
  )
}

function InForce({ page, unit }: { page: StudiesPage; unit: TemperatureUnit }) {
  const { errors, dose } = page.rules
  const adopted = page.studies.items.find((study) => study.adopted !== null)
  const source = errors.isSameMountAssumed ? (
    <span className="text-amber">assumed: this site has not measured its own</span>
  ) : adopted === undefined ? (
    'measured here'
  ) : (
    <>
      measured here,{' '}
      <Link className="link" href={`${href}/${adopted.id}`}>
        study {adopted.number}
      </Link>
    </>
  )
  return (
    <Facts
      isRuled
      facts={[
        {
          name: 'Placing a probe again',
          value: `${log10Words(errors.sameMountLog10)} in log10 of dose, ${halfWidthWords(errors.sameMountLog10 * dose.zC, unit)} all along (k = 2)`,
        },
        { name: 'Where that comes from', value: source },
        {
          name: 'Two barrels alike may differ by',
          value: `${doseShareWords(page.halfWidthLog10)}, and nobody could tell${errors.isSameMountAssumed ? '' : ' (drift between checks is in it)'}`,
        },
        {
          name: 'Smallest tolerance to ask honestly',
          value: `± ${formatNumber(page.smallestToleranceLog10, 3)} in log10: twice the interval; the bench holds recipes to it`,
        },
      ]}
    />
  )
}

function StudyTable({ page, unit }: { page: StudiesPage; unit: TemperatureUnit }) {
  return (
    <Table
      caption="Studies of repeat placements"
      rows={page.studies.items}
      rowKey={(study) => study.id}
      empty={
        <EmptyState title="No study yet.">
          {page.mayCheck
            ? 'Begin one: on steady heat, put one probe into its place again and again beside another that stays. Five placements at least, ten or more are better.'
            : 'A toaster, a master cooper or an administrator begins one.'}
        </EmptyState>
      }
      columns={[
        {
          key: 'no',
          head: 'Study',
          isRowHead: true,
          cell: (study) => (
            <Link className="link font-[640]" href={`${href}/${study.id}`}>
              {study.number}
            </Link>
          ),
        },
        {
          key: 'at',
          head: 'Begun',
          cell: (study) => (
            <>
              <Time at={study.startedAt} zone={page.timeZone} style="date" />
              <span className="block text-soft">{study.startedBy}</span>
            </>
          ),
        },
        {
          key: 'probe',
          head: 'Placed',
          cell: (study) => (
            <>
              {study.probe.name}, beside {study.reference.name}
              <span className="block text-soft">{placeWords(study.place)}</span>
            </>
          ),
        },
        { key: 'n', head: 'Placements', isNumeric: true, cell: countOf },
        {
          key: 'half',
          head: 'One placement',
          unit: 'k = 2',
          cell: (study) => <Figure study={study} unit={unit} />,
        },
        { key: 'state', head: 'State', cell: (study) => <State study={study} /> },
      ]}
    />
  )
}

function countOf(study: StudyDto): number {
  return study.placements.filter((one) => one.struck === null).length
}

function Figure({ study: { result }, unit }: { study: StudyDto; unit: TemperatureUnit }) {
  if (result === null) return <span className="text-mute">not yet</span>
  return (
    <>
      {halfWidthWords(result.halfWidthC, unit)}
      <span className="block text-soft">{log10Words(result.halfWidthLog10)} in log10 of dose</span>
    </>
  )
}

function State({ study }: { study: StudyDto }) {
  if (study.adopted !== null) return <StateText state={`in settings version ${study.adopted.version}`} />
  if (study.state === 'open') return <StateText state="open" tone="attention" />
  return <StateText state={study.state} tone={study.state === 'abandoned' ? 'past' : 'normal'} />
}

function NewStudy({ page }: { page: StudiesPage }) {
  const options = page.probes.map((probe) => ({
    value: probe.id,
    label: `${probe.name}, ${hearthWords(probe.hearth?.number ?? null, probe.usualRole)}`,
  }))
  return (
    <FormDialog
      openLabel="Begin a study"
      openKind="main"
      title="Begin a study of repeat placements"
      submitLabel="Begin"
      method="POST"
      path="/api/repeatability-studies"
      doneHref={`${href}/{id}`}
      fields={[
        {
          name: 'probeId',
          label: 'The probe that is placed again and again',
          kind: 'select',
          options,
          hint: 'A lead probe, at its own place.',
        },
        {
          name: 'referenceProbeId',
          label: 'The probe that stays',
          kind: 'select',
          options,
          hint: 'Nearby on the same heat; it takes the room’s own drift out.',
        },
        {
          name: 'heatWords',
          label: 'What is heated, and how',
          kind: 'words',
          hint: 'Test stave or rose, fire or block, about how hot.',
        },
      ]}
    >
      <p>
        It is done where the dose is made, on heat that stands still for as long as it takes:{' '}
        {formatCount(5, 'placement')} at least.
      </p>
    </FormDialog>
  )
}
