'use client'

import { useState } from 'react'
import useSWR from 'swr'
import { StudyActions } from '@/components/probes/study-actions'
import { StudyPlacing } from '@/components/probes/study-placing'
import type { PlacementDraft } from '@/components/probes/study-placing'
import { StudyView } from '@/components/probes/study-view'
import { useRecentReadings } from '@/components/probes/use-recent-readings'
import { useRequest } from '@/components/ui/use-request'
import type { TemperatureUnit } from '@/lib/format'
import { apiPath, callApi, getApi, tryApi } from '@/lib/http/api-client'
import { settlingRule } from '@/lib/probes/settling-rule'
import type { StudyDto } from '@/lib/probes/study-schema'
import type { SiteRules } from '@/lib/science/site-rules'

export type StudyConsoleProps = {
  study: StudyDto
  rules: SiteRules['checks']
  /** Below it no dose is made, °C. */
  baseTempC: number
  zone: string
  unit: TemperatureUnit
  signerName: string
  mayCheck: boolean
  mayAdopt: boolean
}

/** One study: follows both probes while it is open, and sends what is done; the parts draw. */
export function StudyConsole({
  study: first,
  rules,
  baseTempC,
  zone,
  unit,
  signerName,
  mayCheck,
  mayAdopt,
}: StudyConsoleProps) {
  const params = { id: first.id }
  const path = apiPath('/api/repeatability-studies/{id}', params)
  const { data: study = first, mutate } = useSWR(path, getApi<StudyDto>, {
    fallbackData: first,
    revalidateOnMount: false,
  })
  const isPlacing = study.state === 'open' && mayCheck
  const rule = settlingRule(rules)
  const placed = useRecentReadings(study.probe.id, rule, isPlacing)
  const fixed = useRecentReadings(study.reference.id, rule, isPlacing)
  const { isBusy, problem, send } = useRequest()
  // Kept until it is taken: sent again after a cut it is still one placement.
  const [nextId, setNextId] = useState<string>(() => crypto.randomUUID())

  const keep = (next: StudyDto) => mutate(next, { revalidate: false })

  async function place(draft: PlacementDraft): Promise<boolean> {
    const isTaken = await send(async () => {
      const body = { id: nextId, ...draft }
      await keep(
        await callApi<StudyDto>('POST', '/api/repeatability-studies/{id}/placements', { params, body }),
      )
    })
    if (isTaken) setNextId(crypto.randomUUID())
    return isTaken
  }

  async function act(verb: 'finish' | 'abandon' | 'adopt', body: Record<string, string>) {
    const { data, problem: refused } = await tryApi<StudyDto>(
      'POST',
      `/api/repeatability-studies/{id}/${verb}`,
      { params, body },
    )
    if (refused === null) await keep(data)
    return refused
  }

  async function strike(placementId: string, reason: string) {
    const { data, problem: refused } = await tryApi<StudyDto>(
      'POST',
      '/api/repeatability-studies/{id}/placements/{placementId}/strike',
      { params: { ...params, placementId }, body: { reason } },
    )
    if (refused === null) await keep(data)
    return refused
  }

  return (
    <StudyView
      study={study}
      zone={zone}
      unit={unit}
      onStrike={isPlacing ? strike : null}
      actions={
        <StudyActions
          study={study}
          signerName={signerName}
          mayCheck={mayCheck}
          mayAdopt={mayAdopt}
          onAct={act}
        />
      }
      placing={
        isPlacing ? (
          <StudyPlacing
            study={study}
            placed={placed}
            fixed={fixed}
            rule={rule}
            baseTempC={baseTempC}
            unit={unit}
            isBusy={isBusy}
            problem={problem}
            onPlace={place}
          />
        ) : null
      }
    />
  )
}
