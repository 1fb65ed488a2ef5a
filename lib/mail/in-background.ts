import { log } from '@/lib/log'
import { shared } from '@/lib/runtime'

/**
 * Starts work that the answer to a request must not wait for. It is logged when it fails; shutting down and tests
 * wait for it with {@link settleBackground}.
 */
export function inBackground(what: string, work: () => Promise<unknown>): void {
  const running = runningWork()
  const done = work()
    .catch((error: unknown) => log().error({ err: error, what }, 'work in the background failed'))
    .finally(() => running.delete(done))
  running.add(done)
}

/** Resolves when everything started so far has ended. */
export async function settleBackground(): Promise<void> {
  while (runningWork().size > 0) await Promise.all(runningWork())
}

function runningWork(): Set<Promise<unknown>> {
  return shared('background', () => new Set<Promise<unknown>>())
}
