import { EmptyState } from '@/components/ui/empty-state'
import { StateText } from '@/components/ui/state-text'
import type { Column } from '@/components/ui/table'
import { Table } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import type { AccountDto } from '@/lib/accounts/schema'
import { AccountActions } from './account-actions'
import type { CustomerChoice } from './account-fields'

/** Everybody who has an account; with what an administrator can do about it. */
export function AccountTable({
  accounts,
  ownId,
  canWrite,
  customers,
  timeZone,
}: {
  accounts: readonly AccountDto[]
  ownId: string
  canWrite: boolean
  customers: readonly CustomerChoice[]
  timeZone: string
}) {
  const columns: Column<AccountDto>[] = [
    {
      key: 'name',
      head: 'Name',
      isRowHead: true,
      cell: (one) => <span className="font-[560]">{one.name}</span>,
    },
    { key: 'email', head: 'E-mail', cell: (one) => one.email },
    {
      key: 'role',
      head: 'Role',
      cell: (one) => (one.customer === null ? one.role : `${one.role}, ${one.customer.name}`),
    },
    { key: 'state', head: 'State', cell: (one) => <AccountState account={one} timeZone={timeZone} /> },
    {
      key: 'seen',
      head: 'Last used',
      cell: (one) =>
        one.lastSeenAt === null ? (
          <span className="text-mute">not signed in</span>
        ) : (
          <Time at={one.lastSeenAt} zone={timeZone} />
        ),
    },
  ]
  if (canWrite) {
    columns.push({
      key: 'actions',
      head: <span className="sr-only">What you can do</span>,
      cell: (one) => <AccountActions account={one} isOwn={one.id === ownId} customers={customers} />,
    })
  }
  return (
    <Table
      caption="Accounts"
      columns={columns}
      rows={accounts}
      rowKey={(one) => one.id}
      empty={
        <EmptyState title="Nobody like that has an account.">
          Search for part of a name, an e-mail or a customer, or clear the filters.
        </EmptyState>
      }
    />
  )
}

function AccountState({ account, timeZone }: { account: AccountDto; timeZone: string }) {
  if (account.state === 'active') return <StateText state="active" />
  if (account.state === 'closed') return <StateText state="closed" tone="past" />
  if (account.invitationUntil === null) return <StateText state="invitation has run out" tone="attention" />
  return (
    <span className="text-soft">
      invited, until <Time at={account.invitationUntil} zone={timeZone} />
    </span>
  )
}
