import type { CommittedRows } from '@/lib/live/hub-door'
import { shared } from '@/lib/runtime'

/** A row older than this when it is committed may belong to a firing that is sealed already: see `sealAfterMs`. */
export const lateAfterMs = 2_000

/** Earliest and latest instant of rows that came late, by probe number. */
export type LateSpan = { probeNo: number; fromMs: number; toMs: number }

function held(): Map<number, LateSpan> {
  return shared('ingest.late', () => new Map<number, LateSpan>())
}

/** Remembers which probes had rows that came late, so that the sealing loop looks at their firings again. */
export function noteLateRows(rows: CommittedRows, nowMs: number): void {
  const spans = held()
  for (let i = 0; i < rows.atMs.length; i += 1) {
    const atMs = rows.atMs[i] ?? nowMs
    if (atMs >= nowMs - lateAfterMs) continue
    const probeNo = rows.probeNo[i] ?? 0
    const span = spans.get(probeNo)
    if (span === undefined) spans.set(probeNo, { probeNo, fromMs: atMs, toMs: atMs })
    else if (atMs < span.fromMs) span.fromMs = atMs
    else if (atMs > span.toMs) span.toMs = atMs
  }
}

/** What has come late since the last call. */
export function takeLateSpans(): LateSpan[] {
  const spans = [...held().values()]
  held().clear()
  return spans
}
