'use client'

import { useRouter } from 'next/navigation'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
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

  return (
    <section className="mt-9 max-w-[60rem]">
      <h2 className="mb-2">Where you are signed in</h2>
      <FormError problem={problem} />
      <ul className="border-t border-line">
        {sessions.map((one) => (
          <li
            key={one.id}
            className="flex flex-wrap items-center justify-between gap-x-6 gap-y-1 border-b border-line py-2"
          >
            <div className="min-w-0">
              <p>
                {one.byPinAt === null ? deviceWords(one.userAgent) : `By PIN at ${one.byPinAt}`}
                <span className="text-soft">, {one.address ?? 'address not known'}</span>
              </p>
              <p className="text-small text-soft">
                Signed in <Time at={one.startedAt} zone={timeZone} />, last used{' '}
                <Time at={one.lastSeenAt} zone={timeZone} />
              </p>
            </div>
            {one.isThisOne ? (
              <span className="text-soft">this device</span>
            ) : (
              <Button kind="quiet" onClick={() => end(one)}>
                Sign out there
              </Button>
            )}
          </li>
        ))}
      </ul>
    </section>
  )
}
