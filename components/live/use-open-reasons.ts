'use client'

import { useState } from 'react'
import type { ShortStep } from '@/lib/firings/short-steps'
import { shortRest } from '@/lib/firings/short-steps'
import type { FiresideFacts } from './fireside-facts'

const keyOf = ({ step, stagePosition }: ShortStep) => `${step} ${stagePosition ?? ''}`

export type OpenReasons = {
  /** The newest step that wants its reason and was not put off; null when there is none. */
  now: ShortStep | null
  /** Every step without a reason, put off or not; with the rest as it would be if the firing ended at `endMs`. */
  open: (endMs: number | null) => ShortStep[]
  putOff: (step: ShortStep) => void
}

/** Which steps of a firing still want their reason. */
export function useOpenReasons(facts: FiresideFacts): OpenReasons {
  const [later, setLater] = useState<ReadonlySet<string>>(new Set())
  const open = facts.shortSteps.filter((step) => step.reason === null)
  return {
    now: open.findLast((step) => !later.has(keyOf(step))) ?? null,
    open: (endMs) => {
      const rest = endMs === null ? null : shortRest(facts.shortStepFacts, endMs)
      return rest === null || rest.reason !== null ? open : [...open, rest]
    },
    putOff: (step) => setLater((before) => new Set([...before, keyOf(step)])),
  }
}
