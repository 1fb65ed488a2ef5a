'use client'

import { useRouter } from 'next/navigation'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import type { Column } from '@/components/ui/table'
import { Table } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import { useToast } from '@/components/ui/toast'
import { useRequest } from '@/components/ui/use-request'
import type { SessionDto } from '@/lib/accounts/schema'
import { callApi } from '@/lib/http/api-client'
import { deviceWords } from './device-words'

/** Where one is signed in, and the way to end it elsewhere. */
export function SessionList({ sessions, timeZone }: { sessions: readonly SessionDto[]; timeZone: string }) {
  const router = useRouter()
  const toast = useToast()
  const { problem, send } = useRequest()

  async function end(session: SessionDto) {
    const isEnded = await send(() =>
      callApi('DELETE', '/api/me/sessions/{id}', { params: { id: session.id } }),
    )
    if (isEnded) toast({ words: `Signed out: ${deviceWords(session.userAgent)}.` })
    router.refresh()
  }

  const columns: Column<SessionDto>[] = [
    { key: 'device', head: 'Device', isRowHead: true, cell: (one) => deviceWords(one.userAgent) },
    { key: 'address', head: 'Address', cell: (one) => one.address ?? 'not known' },
    { key: 'started', head: 'Signed in', cell: (one) => <Time at={one.startedAt} zone={timeZone} /> },
    { key: 'seen', head: 'Last used', cell: (one) => <Time at={one.lastSeenAt} zone={timeZone} /> },
    {
      key: 'end',
      head: <span className="sr-only">End</span>,
      cell: (one) =>
        one.isThisOne ? (
          <span className="text-soft">this one</span>
        ) : (
          <Button kind="quiet" onClick={() => end(one)}>
            Sign out there
          </Button>
        ),
    },
  ]
  return (
    <section className="mt-9 max-w-[60rem]">
      <h2 className="mb-2">Where you are signed in</h2>
      <FormError problem={problem} />
      <Table caption="Your open sessions" columns={columns} rows={sessions} rowKey={(one) => one.id} />
    </section>
  )
}
