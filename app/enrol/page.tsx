import type { Metadata } from 'next'
import { EnrolForm } from '@/components/devices/enrol-form'
import { PlainShell } from '@/components/shell/plain-shell'
import { Notice } from '@/components/ui/notice'
import { getWelcome } from '@/lib/accounts/get-welcome'
import { pageDevice } from '@/lib/auth/page-actor'

export const metadata: Metadata = { title: 'Enrol a device' }

export default async function EnrolPage() {
  const [device, { siteName }] = await Promise.all([pageDevice(), getWelcome()])
  return (
    <PlainShell>
      <h1 className="mb-1">Enrol this device</h1>
      {siteName === null ? null : <p className="mb-5 text-soft">{siteName}</p>}
      {device === null ? null : (
        <Notice className="mb-4">This device is {device.name}. Another code gives it another place.</Notice>
      )}
      <EnrolForm />
      <p className="mt-6 text-small text-soft">
        An administrator makes the code on the page Devices; it serves once, within 30 minutes. From then on
        this browser shows what stands in the room without signing in, and those who fire change at it by PIN.
        On a tablet, also add this page to the home screen.
      </p>
    </PlainShell>
  )
}
