'use client'

import { useState } from 'react'
import useSWR from 'swr'
import { FormError } from '@/components/ui/form-error'
import { useRequest } from '@/components/ui/use-request'
import type { FiringDto } from '@/lib/firings/schema'
import { apiPath, callApi, getApi } from '@/lib/http/api-client'
import type { Page } from '@/lib/http/cursor'
import type { ProbeDto } from '@/lib/probes/schema'
import { FiresideSheet } from './fireside-sheet'
import { SwapChoices } from './fireside-swap-choices'
import type { SwapChoice } from './fireside-swap-choices'

const labels = {
  role: 'Probe',
  probeId: 'The one that takes its place',
  isAtSamePlace: 'Its place',
  at: 'When',
}

/**
 * Another probe takes a role of this firing. It goes to the server at once and is not queued: what can be chosen is
 * known there alone. Its instant and id are kept, so that trying again after a cut is the same swap.
 */
export function FiresideSwap({
  firing,
  readNowMs,
  onSwapped,
  onClose,
}: {
  firing: FiringDto
  readNowMs: () => number
  onSwapped: () => void
  onClose: () => void
}) {
  const probes = useSWR(apiPath('/api/probes', {}, { limit: 200, sort: 'hearth' }), getApi<Page<ProbeDto>>)
  const { isBusy, problem, send } = useRequest()
  const [touched, setTouched] = useState<{ id: string; atMs: number } | null>(null)
  const current = firing.probes.filter((probe) => probe.untilAt === null)

  async function swap({ role, probeId, isAtSamePlace, minutesAgo }: SwapChoice) {
    const first = touched ?? { id: crypto.randomUUID(), atMs: readNowMs() }
    setTouched(first)
    const body = {
      id: first.id,
      kind: 'swap',
      at: new Date(first.atMs - minutesAgo * 60_000).toISOString(),
      role,
      probeId,
      isAtSamePlace,
    }
    const isDone = await send(() =>
      callApi('POST', '/api/firings/{id}/marks', { params: { id: firing.id }, body }),
    )
    if (isDone) onSwapped()
  }

  return (
    <FiresideSheet title="Swap a probe" isWide onClose={onClose}>
      <FormError problem={problem} labels={labels} />
      {probes.error !== undefined && probes.data === undefined ? (
        <p className="text-amber">The probes cannot be read now. Try again when the connection is back.</p>
      ) : null}
      <SwapChoices
        current={current}
        spare={probes.data?.items.filter((probe) => !probe.isReading) ?? null}
        isBusy={isBusy}
        onSwap={(choice) => void swap(choice)}
        onClose={onClose}
      />
    </FiresideSheet>
  )
}
