import type { Metadata } from 'next'
import { PieceTable } from '@/components/batches/piece-table'
import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { SearchForm } from '@/components/ui/search-form'
import { nextPageHref } from '@/components/ui/url-query'
import { requirePageActor } from '@/lib/auth/page-actor'
import { listPieces } from '@/lib/batches/list-pieces'
import { listPiecesQuery } from '@/lib/batches/schema'
import type { SearchParams } from '@/lib/http/page-query'
import { readPageQuery } from '@/lib/http/page-query'

export const metadata: Metadata = { title: 'Barrels' }

const shows = [
  { value: 'all', label: 'All' },
  { value: 'waiting', label: 'Waiting, in the queue’s order' },
  { value: 'fired', label: 'Fired' },
]

export default async function BarrelsPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requirePageActor()
  const { query, raw } = await readPageQuery(listPiecesQuery, searchParams)
  const page = await listPieces(actor, query)
  const nextHref = nextPageHref('/barrels', raw, page.nextCursor)
  return (
    <>
      <PageHead title="Barrels" />
      <SearchForm
        action="/barrels"
        values={raw}
        hint="Serial, recipe, customer, lot"
        selects={[{ name: 'show', label: 'Show', options: shows, fallback: 'all' }]}
      />
      <PieceTable pieces={page.items} unit={actor.temperatureUnit} />
      <Pager nextHref={nextHref} />
    </>
  )
}
