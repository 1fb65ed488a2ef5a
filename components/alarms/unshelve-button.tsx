'use client'

import { useRouter } from 'next/navigation'
import { Button } from '@/components/ui/button'
import { useRequest } from '@/components/ui/use-request'
import { callApi } from '@/lib/http/api-client'

/** Takes a shelved alarm back before its time. */
export function UnshelveButton({ id }: { id: string }) {
  const router = useRouter()
  const { isBusy, problem, send } = useRequest()
  const takeBack = async () => {
    await send(() => callApi('POST', '/api/alarms/{id}/unshelve', { params: { id } }))
    router.refresh()
  }
  return (
    <span className="inline-flex items-baseline gap-3">
      <Button kind="quiet" isBusy={isBusy} onClick={() => void takeBack()}>
        Take back
      </Button>
      {problem === null ? null : (
        <span role="alert" className="text-red">
          {problem.detail ?? problem.title}
        </span>
      )}
    </span>
  )
}
