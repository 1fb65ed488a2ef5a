import Link from 'next/link'
import { hearthWords } from '@/components/probes/place-words'
import { classNames } from '@/components/ui/class-names'
import { Table } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import { formatInstant, formatSigned } from '@/lib/format'
import type { DeclaredLossDto, GatewayDetailDto, RefusedReadingDto } from '@/lib/probes/schema'

function None({ children }: { children: React.ReactNode }) {
  return <p className="border-y border-line py-3 text-soft">{children}</p>
}

export function GatewayProbes({ probes }: { probes: GatewayDetailDto['probes'] }) {
  return (
    <Table
      caption="Probes on it"
      rows={probes}
      rowKey={(probe) => probe.id}
      empty={<None>No probe is on it. Add one, or move one here, on the page Probes.</None>}
      columns={[
        { key: 'channel', head: 'Channel', isNumeric: true, cell: (probe) => probe.channel },
        {
          key: 'name',
          head: 'Probe',
          isRowHead: true,
          cell: (probe) => (
            <Link className="link" href={`/probes/${probe.id}`}>
              {probe.name}
            </Link>
          ),
        },
        { key: 'where', head: 'Where', cell: (probe) => hearthWords(probe.hearthNumber, probe.usualRole) },
      ]}
    />
  )
}

/** Each start counts its readings anew; the highest number up to which all are stored says how far it came. */
export function StartTable({ boots, zone }: { boots: GatewayDetailDto['boots']; zone: string }) {
  return (
    <Table
      caption="Starts of its program"
      rows={boots}
      rowKey={(boot) => String(boot.number)}
      empty={<None>It has sent nothing yet.</None>}
      columns={[
        { key: 'no', head: 'Start', isRowHead: true, cell: (boot) => boot.number },
        { key: 'from', head: 'First heard of', cell: (boot) => <Time at={boot.firstSeenAt} zone={zone} /> },
        { key: 'to', head: 'Last heard of', cell: (boot) => <Time at={boot.lastSeenAt} zone={zone} /> },
        { key: 'acked', head: 'Stored up to number', isNumeric: true, cell: (boot) => boot.ackedSeq },
        {
          key: 'clock',
          head: 'Clock behind',
          unit: 's',
          isNumeric: true,
          cell: (boot) => formatSigned(boot.clockOffsetMs / 1000, 1),
        },
        { key: 'refused', head: 'Refused', isNumeric: true, cell: (boot) => boot.refusedCount },
        { key: 'lost', head: 'Lost', isNumeric: true, cell: (boot) => boot.lostCount },
      ]}
    />
  )
}

export function RefusedTable({
  refused,
  reasons,
  chosen,
  href,
  zone,
}: {
  refused: readonly RefusedReadingDto[]
  reasons: GatewayDetailDto['refusedReasons']
  chosen: string | undefined
  href: (reason: string | null) => string
  zone: string
}) {
  if (reasons.length === 0) return <None>Nothing was refused.</None>
  const choices = [
    { reason: null, label: 'All' },
    ...reasons.map(({ reason, count }) => ({ reason, label: `${reason} (${count})` })),
  ]
  return (
    <>
      <ReasonLinks choices={choices} chosen={chosen} href={href} />
      <Table
        caption="Refused readings"
        rows={refused}
        rowKey={(one) => `${one.boot} ${one.seq}`}
        empty={<None>Nothing was refused for this reason.</None>}
        columns={[
          {
            key: 'received',
            head: 'Received',
            isRowHead: true,
            cell: (one) => (
              <span className="whitespace-nowrap">
                {formatInstant(one.receivedAt, zone, 'day')}, {formatInstant(one.receivedAt, zone, 'seconds')}
              </span>
            ),
          },
          { key: 'reason', head: 'Why', cell: (one) => one.reason },
          {
            key: 'probe',
            head: 'Probe',
            cell: (one) =>
              one.probe === null ? (
                <span className="text-mute">none known</span>
              ) : (
                <Link className="link" href={`/probes/${one.probe.id}`}>
                  {one.probe.name}
                </Link>
              ),
          },
          {
            key: 'at',
            head: 'Its instant',
            cell: (one) => one.at ?? <span className="text-mute">none</span>,
          },
          { key: 'boot', head: 'Start', isNumeric: true, cell: (one) => one.boot },
          { key: 'seq', head: 'Number', isNumeric: true, cell: (one) => one.seq },
        ]}
      />
    </>
  )
}

function ReasonLinks({
  choices,
  chosen,
  href,
}: {
  choices: readonly { reason: string | null; label: string }[]
  chosen: string | undefined
  href: (reason: string | null) => string
}) {
  return (
    <ul className="mb-2 flex flex-wrap gap-x-5 gap-y-1">
      {choices.map(({ reason, label }) => {
        const isChosen = (chosen ?? null) === reason
        return (
          <li key={label}>
            <Link
              href={`${href(reason)}#refused`}
              aria-current={isChosen || undefined}
              className={classNames(isChosen ? 'font-[640]' : 'link')}
            >
              {label}
            </Link>
          </li>
        )
      })}
    </ul>
  )
}

export function LossTable({ losses, zone }: { losses: readonly DeclaredLossDto[]; zone: string }) {
  return (
    <Table
      caption="Declared lost"
      rows={losses}
      rowKey={(loss) => `${loss.boot} ${loss.fromSeq} ${loss.toSeq}`}
      empty={<None>It has declared nothing lost. A loss is a gap in the curves, and is shown there.</None>}
      columns={[
        {
          key: 'at',
          head: 'Declared',
          isRowHead: true,
          cell: (loss) => <Time at={loss.declaredAt} zone={zone} />,
        },
        { key: 'count', head: 'Readings', isNumeric: true, cell: (loss) => loss.count },
        { key: 'reason', head: 'Why', cell: (loss) => loss.reason },
        { key: 'boot', head: 'Start', isNumeric: true, cell: (loss) => loss.boot },
        { key: 'from', head: 'From number', isNumeric: true, cell: (loss) => loss.fromSeq },
        { key: 'to', head: 'To number', isNumeric: true, cell: (loss) => loss.toSeq },
      ]}
    />
  )
}
