import { formatMinutes } from '@/lib/format'
import type { Gap } from '@/lib/science/gaps'

/** "22 s" or "3.5 min". */
export function silenceWords(gap: Gap): string {
  return gap.missingS < 120 ? `${Math.round(gap.missingS)}\u00a0s` : formatMinutes(gap.missingS)
}

/** What the picture and the dose do with a silence (SCIENCE §5). */
export function treatmentWords(gap: Gap): string {
  switch (gap.treatment) {
    case 'interpolated':
      return 'drawn dotted, joined for the dose'
    case 'widened':
      return 'drawn dotted, joined for the dose, whose interval it widens'
    case 'incomplete':
      return 'too long to be joined: left open, and the firing is not scored'
  }
}
