import type { Metadata } from 'next'
import { OrderList } from '@/components/orders/order-list'
import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { nextPageHref } from '@/components/ui/url-query'
import { requirePageActor } from '@/lib/auth/page-actor'
import { listOrders } from '@/lib/batches/list-orders'
import type { SearchParams } from '@/lib/http/page-query'

export const metadata: Metadata = { title: 'Orders' }

export default async function OrdersPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requirePageActor()
  const { cursor } = await searchParams
  const { orders, nextCursor } = await listOrders(actor, typeof cursor === 'string' ? cursor : undefined)
  const nextHref = nextPageHref('/orders', {}, nextCursor)
  return (
    <>
      <PageHead title="Your orders" sub="Each barrel and head, and where it is on its way." />
      <OrderList orders={orders} />
      <Pager nextHref={nextHref} />
    </>
  )
}
