import { createAlarmDelay, viewAbove } from '@/lib/alarms/alarm-delay'
import type { FiringState } from '@/lib/live/events'
import type { FiringFacts } from '@/lib/live/firing-facts'
import type { GatewayNow } from '@/lib/live/gateway-watch'
import type { Signal } from '@/lib/live/live-signals'
import type { SignalRules } from '@/lib/science/signal-trouble'

/** Agree again when the difference is this share under the limit. */
const deadbandShare = 0.2
const agreeAfterS = 15

export type PairWatch = {
  /** True while the opposite pair is further apart than the site's limit for its time. */
  see: (lead: Signal | undefined, opposite: Signal | undefined, atMs: number) => boolean
}

export function createPairWatch(rules: SignalRules): PairWatch {
  const delay = createAlarmDelay({ onDelayS: rules.pairApartS, offDelayS: agreeAfterS })
  return {
    see: (lead, opposite, atMs) => {
      const [a, b] = [liveTempC(lead), liveTempC(opposite)]
      const apartC = a === null || b === null ? null : Math.abs(a - b)
      return delay.see(viewAbove(apartC, rules.pairApartC, rules.pairApartC * deadbandShare), atMs) !== null
    },
  }
}

function liveTempC(signal: Signal | undefined): number | null {
  return signal?.condition === 'live' ? signal.tempC : null
}

/** Signs of trouble that are not one probe's own, in words with what to do. */
export function troublesOf(input: {
  facts: Pick<FiringFacts, 'rules'>
  gateway: GatewayNow | null
  doesPairDisagree: boolean
}): FiringState['troubles'] {
  const { facts, gateway, doesPairDisagree } = input
  const { gatewayLostAfterS, clockApartS } = facts.rules.signals
  const troubles: FiringState['troubles'] = []
  if (gateway !== null && gateway.silentS > gatewayLostAfterS) {
    const words = `${gateway.name} is silent: none of its probes is read. Look at its power and its cable.`
    troubles.push({ kind: 'gateway lost', words })
  }
  if (doesPairDisagree) {
    const words = 'The two opposite probes disagree. Which of the two is wrong cannot be known: look at both.'
    troubles.push({ kind: 'pair disagrees', words })
  }
  if (gateway !== null && Math.abs(gateway.clockOffsetS) > clockApartS) {
    const side = gateway.clockOffsetS > 0 ? 'slow' : 'fast'
    const bySeconds = Math.round(Math.abs(gateway.clockOffsetS))
    const words = `The clock of ${gateway.name} is ${bySeconds} s ${side}; its readings are put right by that. Set its clock.`
    troubles.push({ kind: 'clock differs', words })
  }
  return troubles
}
