import { env } from '@/lib/env'
import { formatInstant } from '@/lib/format'
import { inBackground } from '@/lib/mail/in-background'
import { sendMail } from '@/lib/mail/send-mail'
import { passwordChangedMail } from '@/lib/mail/templates'
import { now } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

/** Tells a person that the password was changed, so that a change by somebody else does not stay unseen. */
export function mailPasswordChanged(person: { email: string; name: string }): void {
  const at = now()
  inBackground('a notice of a changed password', async () => {
    const site = await currentSite()
    const link = `${env().APP_ORIGIN}/forgot-password`
    const text = passwordChangedMail({
      siteName: site.name,
      personName: person.name,
      at: formatInstant(at, site.timeZone),
      link,
    })
    await sendMail({ to: person.email, ...text })
  })
}
