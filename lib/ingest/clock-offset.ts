/** What this process remembers of a boot's clock between two messages. */
export type ClockWatch = {
  /** `sentAt` of the last message whose numbers went on. */
  sentAtMs: number
  /** Messages that came with a larger offset than the one that holds, one after the other. */
  doubt: { sinceMs: number; leastOffsetMs: number; messages: number } | null
}

export type ClockMessage = {
  /** Server's clock when the message came in, before anything was waited for. */
  receivedAtMs: number
  /** Gateway's clock when it was sent. */
  sentAtMs: number
  /** It carries a number above every one that this boot has had settled: no late copy of something earlier. */
  doNumbersGoOn: boolean
}

export type ClockOffset = { offsetMs: number; watch: ClockWatch | null }

/** An offset is taken again only when it has moved by more than this (decision 4). */
const stepMs = 1_000
/** A larger offset that nothing else explains is believed once so many messages over this time agree. */
const believedAfterMessages = 3
const believedAfterMs = 10_000

/**
 * Server's clock minus gateway's, ms, by which readings of a boot are dated: received minus sent, which is never less
 * than the truth, since a way only ever takes time. So
 *
 * - the first message sets it, and one that gives less by over a second corrects it at once;
 * - one that gives more by over a second was held up, or the gateway's clock was set back. It was set back for sure
 *   when the numbers go on while `sentAt` went backwards. Else the offset stays, until three messages in over 10 s
 *   have all given more: then the least of them is taken. A cable that is out for a moment moves nothing.
 *
 * @param appliedMs the offset that holds; null when the boot has had nothing settled yet
 */
export function nextClockOffset(
  appliedMs: number | null,
  watch: ClockWatch | null,
  message: ClockMessage,
): ClockOffset {
  const { receivedAtMs, sentAtMs, doNumbersGoOn } = message
  const offsetMs = receivedAtMs - sentAtMs
  if (appliedMs === null) return { offsetMs, watch: { sentAtMs, doubt: null } }
  // A late copy says when it was sent, and nothing of the clock now.
  if (!doNumbersGoOn) return { offsetMs: appliedMs, watch }
  const movedMs = offsetMs - appliedMs
  if (Math.abs(movedMs) <= stepMs) return { offsetMs: appliedMs, watch: { sentAtMs, doubt: null } }
  const isSetBack = watch !== null && sentAtMs < watch.sentAtMs
  if (movedMs < 0 || isSetBack) return { offsetMs, watch: { sentAtMs, doubt: null } }
  const before = watch?.doubt ?? { sinceMs: receivedAtMs, leastOffsetMs: Infinity, messages: 0 }
  const doubt = {
    sinceMs: before.sinceMs,
    leastOffsetMs: Math.min(before.leastOffsetMs, offsetMs),
    messages: before.messages + 1,
  }
  const isBelieved =
    doubt.messages >= believedAfterMessages && receivedAtMs - doubt.sinceMs >= believedAfterMs
  if (isBelieved) return { offsetMs: doubt.leastOffsetMs, watch: { sentAtMs, doubt: null } }
  return { offsetMs: appliedMs, watch: { sentAtMs, doubt } }
}
