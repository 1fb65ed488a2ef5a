'use client'

import { useState } from 'react'
import useSWR from 'swr'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { useRequest } from '@/components/ui/use-request'
import { callApi, getApi } from '@/lib/http/api-client'
import type { HearthDto } from '@/lib/probes/schema'
import { FiresideSheet } from './fireside-sheet'
import { RoomStartOverride } from './room-start-override'

const labels = {
  hearthId: 'Hearth',
  'probes.lead': 'Lead probe',
  probes: 'Probes',
  'override.password': 'Password',
  'override.reason': 'Reason',
  override: 'Override',
}

/** To another hearth before the toast: the free ones, one touch each; its probes take the roles. */
export function FiresideMove({
  firingId,
  onMoved,
  onClose,
}: {
  firingId: string
  onMoved: () => void
  onClose: () => void
}) {
  const hearths = useSWR('/api/hearths', getApi<{ items: HearthDto[] }>)
  const { isBusy, problem, send } = useRequest()
  const [override, setOverride] = useState({ password: '', reason: '' })
  const free = hearths.data?.items.filter((hearth) => hearth.isActive && hearth.live === null) ?? []
  const asksOverride =
    problem !== null && Object.keys(problem.fields ?? {}).some((field) => field.startsWith('override'))
  const move = async (hearthId: string) => {
    const body = { hearthId, ...(asksOverride ? { override } : {}) }
    const isDone = await send(() =>
      callApi('POST', '/api/firings/{id}/move', { params: { id: firingId }, body }),
    )
    if (isDone) onMoved()
  }
  return (
    <FiresideSheet title="Move to another hearth" onClose={onClose}>
      <FormError problem={problem} labels={labels} />
      <p className="mb-4 text-soft">
        Before the toast only. The other hearth’s probes take over from the moment of the touch; the lead must
        sit where the recipe is read.
      </p>
      {asksOverride ? (
        <RoomStartOverride value={override} onValue={setOverride} fields={problem.fields ?? {}} />
      ) : null}
      <div className="flex flex-wrap gap-3">
        {free.map((hearth) => (
          <Button key={hearth.id} isBusy={isBusy} onClick={() => void move(hearth.id)}>
            Hearth {hearth.number}
          </Button>
        ))}
      </div>
      {hearths.data !== undefined && free.length === 0 ? <p>No other hearth is free.</p> : null}
      {hearths.error === undefined ? null : (
        <p className="text-amber">The hearths cannot be read now. Try again when the connection is back.</p>
      )}
      <div className="mt-5 flex justify-end">
        <Button kind="main" autoFocus onClick={onClose}>
          Stay here
        </Button>
      </div>
    </FiresideSheet>
  )
}
