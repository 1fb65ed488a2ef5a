import type { CheckRow } from '@/lib/science/probe-correction'
import { LEAD_CHECK_SPAN_C, leadCheckStanding } from '@/lib/science/probe-correction'

const occasionMs = 24 * 3600 * 1000
const kindNames = { ice: 'ice', boiling: 'boiling water', block: 'a block' } as const

/**
 * What keeps a probe from leading a firing without a signed override, in sentences that name it: never checked, out
 * of date at a point, or never checked where the dose is made. `leadCheckStanding` decides; this finds the words.
 */
export function leadCheckFaults(name: string, checks: readonly CheckRow[], atMs: number): string[] {
  const standing = leadCheckStanding(checks, atMs)
  if (standing === 'in date') return []
  if (standing === 'no check') return [`${name} has never been checked.`]
  const faults = expiredKinds(checks, atMs).map(
    (kind) => `The check of ${name} at ${kindNames[kind]} is out of date.`,
  )
  if (standing === 'no hot point') {
    const { low, high } = LEAD_CHECK_SPAN_C
    faults.push(`${name} was never checked at ${low} °C to ${high} °C, where the dose is made.`)
  }
  return faults
}

/** Kinds whose newest occasion is past its date. */
function expiredKinds(checks: readonly CheckRow[], atMs: number): CheckRow['kind'][] {
  const known = checks.filter((check) => check.checkedAtMs <= atMs)
  return (['ice', 'boiling', 'block'] as const).filter((kind) => {
    const ofKind = known.filter((check) => check.kind === kind)
    const newestMs = Math.max(...ofKind.map((check) => check.checkedAtMs))
    return ofKind.some((check) => newestMs - check.checkedAtMs <= occasionMs && check.dueAtMs < atMs)
  })
}
