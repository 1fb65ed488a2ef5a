'use client'

import { useState } from 'react'
import useSWR from 'swr'
import { bodyOf, emptyDraft, referenceOf, resultOf } from '@/components/probes/check-draft'
import type { CheckDraft } from '@/components/probes/check-draft'
import { CheckDone } from '@/components/probes/check-done'
import { CheckPointStep } from '@/components/probes/check-point-step'
import { CheckPrepareStep } from '@/components/probes/check-prepare-step'
import { CheckResultStep } from '@/components/probes/check-result-step'
import { CheckSettleStep } from '@/components/probes/check-settle-step'
import { StepList } from '@/components/probes/step-list'
import { useRecentReadings } from '@/components/probes/use-recent-readings'
import { useRequest } from '@/components/ui/use-request'
import type { TemperatureUnit } from '@/lib/format'
import { apiPath, callApi, getApi } from '@/lib/http/api-client'
import { settlingRule } from '@/lib/probes/settling-rule'
import type { ProbeDetailDto } from '@/lib/probes/schema'
import type { SiteRules } from '@/lib/science/site-rules'

export type CheckWalkProps = {
  probe: ProbeDetailDto
  rules: SiteRules['checks']
  zone: string
  unit: TemperatureUnit
  serverNowMs: number
}

const steps = ['Point', 'Prepare', 'Settle', 'Result'] as const

/** Walks a person through one check: point, preparation, settling, result. Fetches and sends; the steps draw. */
export function CheckWalk({ probe: first, rules, zone, unit, serverNowMs }: CheckWalkProps) {
  const { data: probe = first, mutate } = useSWR(
    apiPath('/api/probes/{id}', { id: first.id }),
    getApi<ProbeDetailDto>,
    { fallbackData: first, revalidateOnMount: false, revalidateOnFocus: false },
  )
  const [step, setStep] = useState(0)
  const [draft, setDraft] = useState<CheckDraft>(emptyDraft)
  const [isDone, setIsDone] = useState(false)
  const { isBusy, problem, setProblem, send } = useRequest()
  const rule = settlingRule(rules)
  // What was recorded on this page since it was opened counts too.
  const nowMs = Math.max(serverNowMs, ...probe.allChecks.map((check) => Date.parse(check.checkedAt)))
  const live = useRecentReadings(probe.id, rule, step === 2 && !isDone)
  const change = (part: Partial<CheckDraft>) => setDraft((before) => ({ ...before, ...part }))

  function goTo(next: number) {
    setProblem(null)
    setStep(next)
  }

  async function record() {
    const isRecorded = await send(() =>
      callApi('POST', '/api/probes/{id}/checks', { params: { id: probe.id }, body: bodyOf(draft) }),
    )
    if (!isRecorded) return
    await mutate()
    setIsDone(true)
  }

  function again() {
    // The pressure and the altitude of a day hold for the next probe's walk as well; the rest begins anew.
    setDraft({ ...emptyDraft, by: draft.by, stationPressureHpa: draft.stationPressureHpa })
    setIsDone(false)
    goTo(0)
  }

  if (isDone && draft.kind !== null) return <CheckDone probe={probe} kind={draft.kind} onAgain={again} />
  const result = resultOf(draft)
  return (
    <>
      <StepList steps={steps} current={step} />
      {step === 0 ? (
        <CheckPointStep
          probe={probe}
          nowMs={nowMs}
          zone={zone}
          unit={unit}
          onChoose={(kind) => {
            change({ kind, taken: null })
            goTo(1)
          }}
        />
      ) : null}
      {step === 1 && draft.kind !== null ? (
        <CheckPrepareStep
          draft={draft}
          unit={unit}
          isReady={referenceOf(draft) !== null}
          onChange={change}
          onBack={() => goTo(0)}
          onNext={() => goTo(2)}
        />
      ) : null}
      {step === 2 ? (
        <CheckSettleStep
          name={probe.name}
          live={live}
          rule={rule}
          unit={unit}
          onTake={(taken) => {
            change({ taken })
            goTo(3)
          }}
          onBack={() => goTo(1)}
        />
      ) : null}
      {step === 3 && result !== null && draft.kind !== null ? (
        <CheckResultStep
          draft={{ ...draft, kind: draft.kind }}
          result={result}
          checks={probe.allChecks}
          nowMs={nowMs}
          months={rules.probeMonths}
          unit={unit}
          isBusy={isBusy}
          problem={problem}
          onDueOn={(dueOn) => change({ dueOn })}
          onBack={() => goTo(2)}
          onRecord={() => void record()}
        />
      ) : null}
    </>
  )
}
