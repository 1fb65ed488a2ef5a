import type { Metadata } from 'next'
import { forbidden } from 'next/navigation'
import { AuditFilters } from '@/components/audit/audit-filters'
import { AuditTable } from '@/components/audit/audit-table'
import { VerifyButton } from '@/components/audit/verify-button'
import { Notice } from '@/components/ui/notice'
import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { nextPageHref } from '@/components/ui/url-query'
import { listEntries } from '@/lib/audit/list-entries'
import { auditQuery } from '@/lib/audit/schema'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import type { SearchParams } from '@/lib/http/page-query'
import { readPageQuery } from '@/lib/http/page-query'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Audit trail' }

export default async function AuditPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requirePageActor()
  if (!isAllowed(actor, 'audit:read')) forbidden()
  const { query, raw, faults } = await readPageQuery(auditQuery, searchParams)
  const [page, { timeZone }] = await Promise.all([listEntries(actor, query), currentSite()])
  const next = page.nextCursor
  const sub =
    'Every change of consequence, newest first. Entries are only ever added; each names the hash of the one before.'
  return (
    <>
      <PageHead title="Audit trail" sub={sub} />
      <VerifyButton timeZone={timeZone} />
      <AuditFilters values={raw} />
      {faults.length === 0 ? null : <Notice tone="attention">{faults.join(' ')}</Notice>}
      <AuditTable entries={page.items} timeZone={timeZone} />
      <Pager nextHref={nextPageHref('/audit', raw, next)} />
    </>
  )
}
