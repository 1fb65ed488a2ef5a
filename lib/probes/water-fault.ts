import { formatNumber } from '@/lib/format'
import type { SiteRules } from '@/lib/science/site-rules'

/** What of a water check lies above the site's limits, in a sentence; null when nothing does. */
export function waterFault(
  { tcaNgPerL, freeChlorineMgPerL }: { tcaNgPerL: number; freeChlorineMgPerL: number },
  { waterTcaMaxNgPerL, waterFreeChlorineMaxMgPerL }: SiteRules['checks'],
): string | null {
  const faults: string[] = []
  if (tcaNgPerL > waterTcaMaxNgPerL) {
    faults.push(`TCA ${formatNumber(tcaNgPerL, 2)} ng/L is above ${formatNumber(waterTcaMaxNgPerL, 2)}`)
  }
  if (freeChlorineMgPerL > waterFreeChlorineMaxMgPerL) {
    faults.push(
      `free chlorine ${formatNumber(freeChlorineMgPerL, 3)} mg/L is above ${formatNumber(waterFreeChlorineMaxMgPerL, 3)}`,
    )
  }
  if (faults.length === 0) return null
  const words = faults.join(' and ')
  return `${words.charAt(0).toUpperCase()}${words.slice(1)}.`
}
