import type { TroubleCode } from '@/lib/science/signal-trouble'
import { troubleCodes } from '@/lib/science/signal-trouble'

/** Why a probe gives no reading, in words, and what to do about it. Pure: hub and fireside say the same. */
export const signalCauses = {
  'nothing received yet': 'Look at its plug and at the gateway.',
  'nothing more received': 'Look at the gateway, its power and its cable.',
  'out of the thermocouple’s range': 'Look at its plug: the wires may be crossed, or of another type.',
  'open circuit': 'Look at its plug and its lead.',
  'short circuit': 'Look for bare wires that touch.',
  'the gateway says it is faulty': 'Look at the module’s lamp for this channel.',
  'stuck: it stands still while the coals move': 'Pull its plug and put it back, or take another probe.',
  'jumps faster than wood can': 'Look at its plug and whether it sits fast.',
} as const
export type SignalCause = keyof typeof signalCauses

const byFlag: readonly SignalCause[] = [
  'out of the thermocouple’s range',
  'open circuit',
  'short circuit',
  'the gateway says it is faulty',
]

/** Of a newest reading that is none: by what was found out about it, else by the gateway's flag. */
export function causeOf(trouble: TroubleCode, flag: number): SignalCause {
  if (trouble === troubleCodes.stuck) return 'stuck: it stands still while the coals move'
  if (trouble === troubleCodes.step) return 'jumps faster than wood can'
  return byFlag[flag] ?? 'the gateway says it is faulty'
}

/** What to do about a cause; for one that is not known here, where to begin. */
export function adviceFor(cause: string | null): string {
  const known = Object.entries(signalCauses).find(([name]) => name === cause)
  return known?.[1] ?? 'Look at its plug and its lead.'
}
