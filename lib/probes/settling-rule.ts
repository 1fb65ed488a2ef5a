import type { SiteRules } from '@/lib/science/site-rules'
import type { SettlingRule } from '@/lib/science/stability'

/** The site's rule of settling, as `settlingOf` takes it. */
export function settlingRule({
  settleWindowS,
  settleSdC,
  settleSlopeCPerMin,
}: SiteRules['checks']): SettlingRule {
  return { windowS: settleWindowS, sdMaxC: settleSdC, slopeMaxCPerMin: settleSlopeCPerMin }
}
