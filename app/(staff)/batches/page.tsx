import type { Metadata } from 'next'
import { BatchTable } from '@/components/batches/batch-table'
import { NewBatch } from '@/components/batches/new-batch'
import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { SearchForm } from '@/components/ui/search-form'
import { nextPageHref } from '@/components/ui/url-query'
import { requirePageActor } from '@/lib/auth/page-actor'
import { batchChoices } from '@/lib/batches/batch-choices'
import { listBatches } from '@/lib/batches/list-batches'
import { listBatchesQuery } from '@/lib/batches/schema'
import type { SearchParams } from '@/lib/http/page-query'
import { readPageQuery } from '@/lib/http/page-query'

export const metadata: Metadata = { title: 'Batches' }

export default async function BatchesPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requirePageActor()
  const { query, raw } = await readPageQuery(listBatchesQuery, searchParams)
  const [page, choices] = await Promise.all([listBatches(actor, query), batchChoices(actor)])
  return (
    <>
      <PageHead title="Batches" actions={choices === null ? undefined : <NewBatch {...choices} />} />
      <SearchForm action="/batches" values={raw} hint="Number, customer, recipe, lot" />
      <BatchTable batches={page.items} />
      <Pager nextHref={nextPageHref('/batches', raw, page.nextCursor)} />
    </>
  )
}
