import type { Metadata } from 'next'
import { NumbersView } from '@/components/numbers/numbers-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'How the numbers are made' }

export default async function HowTheNumbersAreMadePage() {
  const actor = await requirePageActor()
  const site = await currentSite()
  return <NumbersView rules={site.rules} siteVersion={site.version} unit={actor.temperatureUnit} />
}
