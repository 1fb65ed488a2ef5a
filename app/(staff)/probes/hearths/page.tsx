import type { Metadata } from 'next'
import { HearthsView } from '@/components/probes/hearths-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import { listHearths } from '@/lib/probes/list-hearths'

export const metadata: Metadata = { title: 'Hearths' }

export default async function HearthsPage() {
  const actor = await requirePageActor()
  const { items } = await listHearths(actor)
  return <HearthsView hearths={items} mayWrite={isAllowed(actor, 'room:write')} />
}
