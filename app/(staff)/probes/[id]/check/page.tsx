import type { Metadata } from 'next'
import { CheckView } from '@/components/probes/check-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import { requirePermission } from '@/lib/auth/permissions'
import { orNotFound } from '@/lib/http/or-not-found'
import { getProbe } from '@/lib/probes/get-probe'
import { nowMs } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Check a probe' }

export default async function CheckPage({ params }: { params: Promise<{ id: string }> }) {
  const actor = await requirePageActor()
  requirePermission(actor, 'checks:write')
  const { id } = await params
  const [probe, { rules, timeZone }] = await Promise.all([
    orNotFound(getProbe(actor, { id }), id),
    currentSite(),
  ])
  return (
    <CheckView
      probe={probe}
      rules={rules.checks}
      zone={timeZone}
      unit={actor.temperatureUnit}
      serverNowMs={nowMs()}
    />
  )
}
