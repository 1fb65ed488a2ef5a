import Link from 'next/link'
import { StateText } from '@/components/ui/state-text'
import { Table } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import { formatDoseFigure, formatNumber } from '@/lib/format'
import type { RecipeVersionDto } from '@/lib/recipes/schema'
import { versionTone } from './recipe-table'

/** A recipe's versions through time: state, who, when, why, dose. */
export function VersionTable({ versions, zone }: { versions: readonly RecipeVersionDto[]; zone: string }) {
  return (
    <Table
      caption="Versions, the newest first"
      rows={versions}
      rowKey={(version) => version.id}
      columns={[
        {
          key: 'number',
          head: 'Version',
          isRowHead: true,
          cell: (version) => (
            <Link href={`/recipe-versions/${version.id}`} className="link whitespace-nowrap">
              version {version.number}
            </Link>
          ),
        },
        {
          key: 'state',
          head: 'State',
          cell: ({ state }) => <StateText state={state} tone={versionTone(state)} />,
        },
        { key: 'author', head: 'By', className: 'whitespace-nowrap', cell: ({ author }) => author.name },
        {
          key: 'when',
          head: 'Since',
          cell: (version) => <Time at={stateSince(version)} zone={zone} style="date" />,
        },
        { key: 'why', head: 'Why', className: 'w-full', cell: why },
        {
          key: 'dose',
          head: <span className="whitespace-nowrap">Target dose</span>,
          unit: 'min',
          isNumeric: true,
          cell: ({ targetDoseMinutes }) => formatDoseFigure(targetDoseMinutes),
        },
        {
          key: 'fire',
          head: 'Fire',
          unit: 'min',
          isNumeric: true,
          cell: ({ totalMinutes }) => formatNumber(totalMinutes, 0),
        },
      ]}
    />
  )
}

/** When the version came to be what it is. */
function stateSince(version: RecipeVersionDto): string {
  const since = {
    draft: version.returnedAt ?? version.createdAt,
    'in review': version.sentAt,
    approved: version.approvedAt,
    superseded: version.supersededAt,
    withdrawn: version.withdrawnAt,
  }[version.state]
  return since ?? version.updatedAt
}

function why(version: RecipeVersionDto): string {
  if (version.state === 'withdrawn') return `${version.withdrawnBy ?? ''}: ${version.withdrawReason ?? ''}`
  if (version.state === 'draft' && version.returnReason !== null) {
    return `Returned by ${version.returnedBy ?? ''}: ${version.returnReason}`
  }
  const remark = version.signatures.find(({ reason }) => reason !== null)?.reason
  const approval = version.approvedBy === null ? '' : `Approved by ${version.approvedBy}. `
  return `${approval}${remark ?? version.content.flavourIntent}`
}
