import { formatAge, formatCount, formatNumber } from '@/lib/format'
import type { GatewayDto } from '@/lib/probes/schema'

export type GatewayWords = { words: string; tone: 'plain' | 'attention' | 'wrong' }

/** A gateway sends every second; one that is silent for longer than this has a fault. */
const silentAfterS = 10
/** Readings that wait longer than this are behind, not on their way. */
const behindAfterS = 60
const clockApartS = 2

/** How a gateway stands, in a sentence, with what to do. */
export function gatewayWords(gateway: GatewayDto, nowMs: number): GatewayWords {
  if (gateway.retiredAt !== null) return { words: 'Retired: nothing is taken from it.', tone: 'plain' }
  if (gateway.tokenCount === 0) {
    return { words: 'It cannot send: it has no token. Make a code and enrol it.', tone: 'attention' }
  }
  if (gateway.lastSeenAt === null) {
    return { words: 'Never heard of. Start its program with its token.', tone: 'attention' }
  }
  const silentS = (nowMs - Date.parse(gateway.lastSeenAt)) / 1000
  if (silentS > silentAfterS) {
    return { words: `Silent for ${formatAge(silentS)}. Look at its power and its line.`, tone: 'wrong' }
  }
  return (
    behindWords(gateway, nowMs) ?? clockWords(gateway) ?? { words: 'Sending, up to date.', tone: 'plain' }
  )
}

function behindWords({ status }: GatewayDto, nowMs: number): GatewayWords | null {
  if (status === null || status.oldestUnsentAt === null) return null
  const behindS = (nowMs - Date.parse(status.oldestUnsentAt)) / 1000
  if (behindS <= behindAfterS) return null
  return {
    words:
      `Sending, with ${formatCount(status.spooledReadings, 'reading')} behind, the oldest from ` +
      `${formatAge(behindS)} ago. It catches up by itself; if that grows, look at its line.`,
    tone: 'attention',
  }
}

function clockWords({ clockOffsetMs }: GatewayDto): GatewayWords | null {
  const offsetS = (clockOffsetMs ?? 0) / 1000
  if (Math.abs(offsetS) <= clockApartS) return null
  const by = `${formatNumber(Math.abs(offsetS), 1)} s ${offsetS > 0 ? 'behind' : 'ahead of'} ours`
  return {
    words: `Sending. Its clock is ${by}; that is put right here. Set its time service.`,
    tone: 'attention',
  }
}
