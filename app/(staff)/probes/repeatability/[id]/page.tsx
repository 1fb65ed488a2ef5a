import type { Metadata } from 'next'
import { StudyConsole } from '@/components/probes/study-console'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import { orNotFound } from '@/lib/http/or-not-found'
import { getStudy } from '@/lib/probes/get-study'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Repeat placements' }

export default async function StudyPage({ params }: { params: Promise<{ id: string }> }) {
  const actor = await requirePageActor()
  const { id } = await params
  const [study, { rules, timeZone }] = await Promise.all([
    orNotFound(getStudy(actor, { id }), id),
    currentSite(),
  ])
  return (
    <StudyConsole
      study={study}
      rules={rules.checks}
      baseTempC={rules.dose.baseTempC}
      zone={timeZone}
      unit={actor.temperatureUnit}
      signerName={actor.name}
      mayCheck={isAllowed(actor, 'checks:write')}
      mayAdopt={isAllowed(actor, 'repeatability:adopt')}
    />
  )
}
