import { backoffMs } from './backoff'
import type { GatewayStatus, IngestAnswer, IngestMessage, IngestProblem, Refusal } from './protocol'
import { MAX_LOSSES_PER_MESSAGE, STATUS_EVERY_MS } from './protocol'
import type { Spool, SpoolBatch } from './spool'
import { isTokenRefused, type SendOutcome, type Transport } from './transport'

/** The gateway's clock, ms since 1970, and its alarm; tests turn it by hand. `wait` gives its own undoing. */
export type GatewayClock = {
  nowMs: () => number
  wait: (durationMs: number, then: () => void) => () => void
}

export const systemClock: GatewayClock = {
  nowMs: () => Date.now(),
  wait: (durationMs, then) => {
    const timer = setTimeout(then, durationMs)
    return () => clearTimeout(timer)
  },
}

export type SenderEvents = {
  /** Said once when it begins and not again until something else happens. */
  onTrouble?: (sentence: string) => void
  onRecovered?: (sentence: string) => void
  onRefused?: (bootId: string, refused: readonly Refusal[]) => void
}

export type SenderOptions = SenderEvents & {
  spool: Spool
  /** In order of preference. */
  transports: readonly Transport[]
  clock?: GatewayClock
  random?: () => number
  maxReadings?: number
  /** Between tries with a token that the server refuses, or a message that it will not take. */
  slowRetryMs?: number
  /** Which program this is and for how long it has run: then its status goes along with the readings. */
  program?: { version: string; uptimeS: () => number }
}

export type SenderState = 'idle' | 'sending' | 'backing off' | 'token refused' | 'message refused' | 'stopped'

export type Sender = {
  /** There may be something new in the spool. Does not shorten a wait after a failure. */
  wake: () => void
  state: () => SenderState
  /** Gives the message under way 2 s to finish, then closes the transports. */
  stop: () => Promise<void>
}

/** 2,000 readings are some 300 KB of JSON, well under the socket's limit of 1 MB. */
const DEFAULT_MAX_READINGS = 2_000
const DEFAULT_SLOW_RETRY_MS = 60_000
const STOP_WITHIN_MS = 2_000

/**
 * Sends what the spool holds, one message at a time and in order, and drops what the server acknowledges. Whatever
 * was not acknowledged is sent again: after exponential backoff with jitter when the server cannot be reached or
 * has trouble of its own, sooner when a way opens; every `slowRetryMs` when it refuses the token or the message.
 * Nothing is ever thrown away because the server refused it whole.
 */
export function createSender(options: SenderOptions): Sender {
  const { spool, transports, clock = systemClock, random = Math.random } = options
  const slowRetryMs = options.slowRetryMs ?? DEFAULT_SLOW_RETRY_MS
  const fullLimit = options.maxReadings ?? DEFAULT_MAX_READINGS
  let state: SenderState = 'idle'
  let limit = fullLimit
  let failures = 0
  let trouble: string | null = null
  let underWay: Promise<void> = Promise.resolve()
  let cancelWait = () => {}
  const statusNow = createStatusTeller(options.program, spool, clock)

  const isStopped = () => state === 'stopped'

  const report = (sentence: string) => {
    if (trouble !== sentence) options.onTrouble?.(sentence)
    trouble = sentence
  }
  const pause = (nextState: SenderState, durationMs: number) => {
    if (isStopped()) return
    state = nextState
    cancelWait = clock.wait(durationMs, () => {
      for (const transport of transports) transport.reconnect()
      proceed()
    })
  }
  const backOff = (sentence: string) => {
    report(sentence)
    pause('backing off', backoffMs(failures, random))
    failures += 1
  }
  const accept = (message: IngestMessage, answer: IngestAnswer) => {
    if (trouble !== null) options.onRecovered?.('The server takes readings again.')
    trouble = null
    if (answer.refused.length > 0) options.onRefused?.(message.bootId, answer.refused)
    const highestSent = message.readings.at(-1)?.seq ?? message.lost?.at(-1)?.to ?? 0
    spool.acknowledge(message.bootId, answer.ackedSeq)
    const isProgress =
      answer.ackedSeq >= Math.max(message.readings[0]?.seq ?? 0, message.lost?.[0]?.from ?? 0)
    if (!isProgress && highestSent > 0) {
      backOff(
        `The server acknowledged no further than reading ${answer.ackedSeq} of ${highestSent}; sending again.`,
      )
      return
    }
    failures = 0
    limit = Math.min(fullLimit, limit * 2)
    proceed()
  }
  const refuse = (message: IngestMessage, problem: IngestProblem) => {
    const reason = problem.detail ?? problem.title
    if (isTokenRefused(problem)) {
      report(
        `The server refuses this gateway's token (${problem.status}: ${reason}). Readings are kept here. ` +
          'An administrator can make a new token for it, or a code to enrol it again, under Gateways.',
      )
      pause('token refused', slowRetryMs * (1 + 0.2 * random()))
    } else if (problem.status === 422 && message.status !== undefined) {
      // A server from before statuses takes no message with one: once more without.
      statusNow.pause()
      proceed()
    } else if (problem.status === 413 && message.readings.length > 1) {
      limit = Math.max(1, message.readings.length >> 1)
      proceed()
    } else if (
      problem.status >= 500 ||
      problem.status === 429 ||
      problem.status === 404 ||
      problem.status === 408
    ) {
      backOff(`The server cannot take readings now (${problem.status}: ${reason}). Readings are kept here.`)
    } else {
      report(
        `The server will not take a message with readings ${message.readings[0]?.seq ?? '-'} to ` +
          `${message.readings.at(-1)?.seq ?? '-'} (${problem.status}: ${reason}). They are kept here.`,
      )
      // It was not the status then.
      statusNow.goOn()
      pause('message refused', slowRetryMs * (1 + 0.2 * random()))
    }
  }
  const settle = (message: IngestMessage, outcome: SendOutcome) => {
    if (outcome.kind === 'answer') accept(message, outcome.answer)
    else if (outcome.kind === 'problem') refuse(message, outcome.problem)
    else backOff(`The server cannot be reached (${outcome.detail}). Readings are kept here.`)
  }
  const sendNext = async (): Promise<void> => {
    const batch = spool.peek(limit)
    if (batch === null) {
      state = 'idle'
      return
    }
    const lost = batch.lost.slice(0, MAX_LOSSES_PER_MESSAGE)
    const status = statusNow.of(batch)
    const message: IngestMessage = {
      bootId: batch.bootId,
      sentAt: new Date(clock.nowMs()).toISOString(),
      readings: batch.readings,
      ...(lost.length > 0 && { lost }),
      ...(status !== null && { status }),
    }
    const outcome = await sendByFirstWay(transports, message)
    // An answer that comes while stopping still counts: what it acknowledges need not be sent again.
    if (isStopped() && outcome.kind === 'answer') spool.acknowledge(message.bootId, outcome.answer.ackedSeq)
    if (!isStopped()) settle(message, outcome)
  }
  const proceed = () => {
    if (isStopped()) return
    state = 'sending'
    underWay = sendNext().catch((error: unknown) => {
      backOff(`The spool cannot be read (${error instanceof Error ? error.message : String(error)}).`)
    })
  }

  for (const transport of transports) {
    transport.onOpened?.(() => {
      if (state !== 'backing off') return
      cancelWait()
      proceed()
    })
  }
  return {
    wake: () => {
      if (state === 'idle') proceed()
    },
    state: () => state,
    stop: async () => {
      state = 'stopped'
      cancelWait()
      await Promise.race([underWay, new Promise<void>((resolve) => clock.wait(STOP_WITHIN_MS, resolve))])
      await Promise.all(transports.map((transport) => transport.close()))
    },
  }
}

type StatusTeller = {
  /** The status to go along with this batch; null when the last one is not old enough. */
  of: (batch: SpoolBatch) => GatewayStatus | null
  pause: () => void
  goOn: () => void
}

function createStatusTeller(
  program: SenderOptions['program'],
  spool: Spool,
  clock: GatewayClock,
): StatusTeller {
  let toldAtMs = -Infinity
  let isOn = true
  return {
    of: (batch) => {
      const nowMs = clock.nowMs()
      // A clock that was set back must not keep it silent.
      if (program === undefined || !isOn || Math.abs(nowMs - toldAtMs) < STATUS_EVERY_MS) return null
      toldAtMs = nowMs
      const { bytes, readings } = spool.status()
      return {
        spooledReadings: readings,
        spooledBytes: bytes,
        oldestUnsentAt: batch.readings[0]?.at ?? null,
        programVersion: program.version,
        uptimeS: Math.floor(program.uptimeS()),
      }
    },
    pause: () => {
      isOn = false
    },
    goOn: () => {
      isOn = true
    },
  }
}

/** Takes the first way that is ready; when it turns out not to work, the next one at once. */
async function sendByFirstWay(
  transports: readonly Transport[],
  message: IngestMessage,
): Promise<SendOutcome> {
  let outcome: SendOutcome = { kind: 'unreachable', detail: 'no connection' }
  for (const transport of transports) {
    if (!transport.isReady()) continue
    outcome = await transport.send(message)
    if (outcome.kind !== 'unreachable') return outcome
  }
  return outcome
}
