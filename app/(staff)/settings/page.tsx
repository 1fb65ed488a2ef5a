import type { Metadata } from 'next'
import { SettingsForm } from '@/components/site/settings-form'
import { PageHead } from '@/components/ui/page-head'
import { Time } from '@/components/ui/time'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import { getSiteSettings } from '@/lib/site/get-site-settings'
import { ruleBounds } from '@/lib/site/rule-bounds'
import { timeZoneChoices } from '@/lib/site/time-zone-choices'

export const metadata: Metadata = { title: 'Settings' }

export default async function SettingsPage() {
  const actor = await requirePageActor()
  const settings = await getSiteSettings(actor)
  return (
    <>
      <PageHead
        title="Settings"
        aside={`version ${settings.version}`}
        sub={
          <>
            In force since <Time at={settings.changedAt} zone={settings.timeZone} />, by{' '}
            {settings.changedBy ?? 'the set-up'}.
          </>
        }
      />
      <SettingsForm
        key={settings.version}
        settings={settings}
        bounds={ruleBounds()}
        timeZones={timeZoneChoices(settings.timeZone)}
        unit={actor.temperatureUnit}
        isReadOnly={!isAllowed(actor, 'site:write')}
      />
    </>
  )
}
