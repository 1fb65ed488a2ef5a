import type { IngestAnswer, IngestMessage, IngestProblem } from './protocol'
import { ingestAnswerSchema, ingestProblemSchema } from './protocol'

/** What became of one message: the server's answer, its refusal, or no word from it. */
export type SendOutcome =
  | { kind: 'answer'; answer: IngestAnswer }
  | { kind: 'problem'; problem: IngestProblem }
  | { kind: 'unreachable'; detail: string }

/** One way to the server. `send` never throws and settles within the transport's own time limit. */
export type Transport = {
  name: string
  /** False while this way is known not to work; the sender then takes the next one. */
  isReady: () => boolean
  send: (message: IngestMessage) => Promise<SendOutcome>
  /** Tries again after a refusal or a loss, when the transport does not do so by itself. */
  reconnect: () => void
  /** Calls back whenever the way has opened, for a transport that notices. */
  onOpened?: (then: () => void) => void
  close: () => Promise<void>
}

/** Reads what the server said, over whichever way it came; what is neither answer nor problem counts as no word. */
export function readOutcome(payload: unknown): SendOutcome {
  const answer = ingestAnswerSchema.safeParse(payload)
  if (answer.success) return { kind: 'answer', answer: answer.data }
  const problem = ingestProblemSchema.safeParse(payload)
  if (problem.success) return { kind: 'problem', problem: problem.data }
  return { kind: 'unreachable', detail: 'the answer was not understood' }
}

/** True when the server knows this gateway's token no more, or never did. */
export function isTokenRefused(problem: IngestProblem): boolean {
  return problem.status === 401 || problem.status === 403
}
