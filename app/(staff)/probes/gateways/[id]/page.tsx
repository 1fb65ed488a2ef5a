import type { Metadata } from 'next'
import { GatewayView } from '@/components/probes/gateway-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import { orNotFound } from '@/lib/http/or-not-found'
import type { SearchParams } from '@/lib/http/page-query'
import { readPageQuery } from '@/lib/http/page-query'
import { gatewayPageQuery, getGatewayPage } from '@/lib/probes/get-gateway-page'

export const metadata: Metadata = { title: 'Gateway' }

type Props = { params: Promise<{ id: string }>; searchParams: SearchParams }

export default async function GatewayPage({ params, searchParams }: Props) {
  const actor = await requirePageActor()
  const { id } = await params
  const { query, raw } = await readPageQuery(gatewayPageQuery, searchParams)
  const page = await orNotFound(getGatewayPage(actor, { ...query, id }), id)
  return <GatewayView page={page} values={raw} />
}
