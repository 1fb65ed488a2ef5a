'use client'

import { useState } from 'react'
import type { FiringState } from '@/lib/live/events'
import type { AdviceAnswer } from './fireside-advice'

type Ask = NonNullable<NonNullable<FiringState['forecast']>['ask']>

/** Advice that moves by less than this is the same advice, and is not put again, min. */
const SAME_WITHIN_MIN = 1

/** True when what was answered is what is advised now. */
export function isSameAdvice(answered: Ask, now: Ask): boolean {
  return answered.kind === now.kind && Math.abs(answered.minutes - now.minutes) <= SAME_WITHIN_MIN
}

/** The advice that is to be taken or waved away now; each piece is put once. `keep` logs the answer with its words. */
export function useAdvice(
  forecast: FiringState['forecast'] | null,
  keep: (words: string, answer: AdviceAnswer) => void,
): { words: string; answer: (answer: AdviceAnswer) => void } | null {
  const [answered, setAnswered] = useState<Ask | null>(null)
  const ask = forecast?.ask ?? null
  if (forecast === null || ask === null) return null
  if (answered !== null && isSameAdvice(answered, ask)) return null
  return {
    words: forecast.advice,
    answer: (answer) => {
      setAnswered(ask)
      keep(forecast.advice, answer)
    },
  }
}
