import { sameMountHalfLog10 } from '@/lib/science/same-mount'
import type { SiteRules } from '@/lib/science/site-rules'

/** The smallest tolerance that the site can honestly ask: twice its same-mount interval, rounded up to 0.001. */
export function smallestHonestTolerance(rules: Pick<SiteRules, 'errors' | 'dose'>): number {
  return Math.ceil(2 * sameMountHalfLog10(rules) * 1000 - 1e-9) / 1000
}

/** What is wrong with a tolerance that the site cannot judge by, or null. */
export function explainTolerance(
  toleranceLog10: number,
  rules: Pick<SiteRules, 'errors' | 'dose'>,
): string | null {
  const smallest = smallestHonestTolerance(rules)
  if (toleranceLog10 >= smallest) return null
  const assumed = rules.errors.isSameMountAssumed ? ', assumed until the site has measured its own' : ''
  return (
    `The tolerance ${toleranceLog10} is finer than this site can tell apart. Ask for ${smallest} or more, ` +
    `twice the same-mount interval of ${Number(sameMountHalfLog10(rules).toFixed(3))}${assumed}.`
  )
}
