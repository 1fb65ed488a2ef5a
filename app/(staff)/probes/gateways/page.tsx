import type { Metadata } from 'next'
import { GatewaysView } from '@/components/probes/gateways-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import { listGateways } from '@/lib/probes/list-gateways'
import { nowMs } from '@/lib/runtime'

export const metadata: Metadata = { title: 'Gateways' }

export default async function GatewaysPage() {
  const actor = await requirePageActor()
  const { items } = await listGateways(actor)
  return <GatewaysView gateways={items} nowMs={nowMs()} mayWrite={isAllowed(actor, 'room:write')} />
}
