import type { Metadata } from 'next'
import { AccountTable } from '@/components/accounts/account-table'
import { accountFilters } from '@/components/accounts/account-filters'
import { InviteDialog } from '@/components/accounts/invite-dialog'
import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { SearchForm } from '@/components/ui/search-form'
import { changeQuery } from '@/components/ui/url-query'
import { listAccounts } from '@/lib/accounts/list-accounts'
import { listCustomers } from '@/lib/accounts/list-customers'
import { accountListQuery } from '@/lib/accounts/schema'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import type { SearchParams } from '@/lib/http/page-query'
import { readPageQuery } from '@/lib/http/page-query'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Accounts' }

export default async function AccountsPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requirePageActor()
  const canWrite = isAllowed(actor, 'accounts:write')
  const { query, raw } = await readPageQuery(accountListQuery, searchParams)
  const [page, customers, { timeZone }] = await Promise.all([
    listAccounts(actor, query),
    listCustomers(actor, { limit: 200 }),
    currentSite(),
  ])
  const href = (cursor: string) => changeQuery('/accounts', raw, { cursor })
  const invite = canWrite ? <InviteDialog customers={customers.items} /> : undefined
  const table = { canWrite, customers: customers.items, timeZone, ownId: actor.accountId }
  return (
    <>
      <PageHead title="Accounts" actions={invite} />
      <SearchForm action="/accounts" values={raw} hint="Name, e-mail, customer" selects={accountFilters} />
      <AccountTable accounts={page.items} {...table} />
      <Pager nextHref={page.nextCursor === null ? undefined : href(page.nextCursor)} />
    </>
  )
}
