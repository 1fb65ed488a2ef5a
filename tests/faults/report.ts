import type { FaultKind } from '@/tests/faults/deck'
import { byFault, faultKinds } from '@/tests/faults/deck'

/** What came of one kind of fault; of two at once both are told. */
export type FaultResult = {
  times: number
  acknowledged: number
  lost: number
  doubled: number
  /** Holes and repeats at the viewers, on the wire and in their pictures. */
  viewerGaps: number
  viewerDoubles: number
  longestRecoveryS: number
  longestViewerBackS: number
  doseDifference: number
}

export type FaultsReport = {
  seed: number
  results: Record<FaultKind, FaultResult>
  facts: [what: string, value: string][]
  /** Each is a loss, a double, a change or a dose that differs: none may be there. */
  failures: string[]
}

export function noResults(): Record<FaultKind, FaultResult> {
  return byFault(() => ({
    times: 0,
    acknowledged: 0,
    lost: 0,
    doubled: 0,
    viewerGaps: 0,
    viewerDoubles: 0,
    longestRecoveryS: 0,
    longestViewerBackS: 0,
    doseDifference: 0,
  }))
}

const heads = [
  'fault',
  'times',
  'acknowledged',
  'lost',
  'doubled',
  'viewer gaps',
  'viewer doubles',
  'readings back s',
  'viewers back s',
  'dose difference',
]

export function printReport(report: FaultsReport): string {
  const lines = faultKinds.map((kind) => {
    const one = report.results[kind]
    return [
      kind,
      String(one.times),
      String(one.acknowledged),
      String(one.lost),
      String(one.doubled),
      String(one.viewerGaps),
      String(one.viewerDoubles),
      one.longestRecoveryS.toFixed(1),
      one.longestViewerBackS.toFixed(1),
      one.doseDifference.toExponential(1),
    ]
  })
  const widths = heads.map((head, i) => Math.max(head.length, ...lines.map((line) => line[i]?.length ?? 0)))
  const row = (cells: readonly string[]) =>
    cells
      .map((cell, i) => (i === 0 ? cell.padEnd(widths[i] ?? 0) : cell.padStart(widths[i] ?? 0)))
      .join('  ')
      .trimEnd()
  const widest = Math.max(...report.facts.map(([what]) => what.length))
  const shownFailures = report.failures.slice(0, 40)
  return [
    row(heads),
    row(widths.map((width) => '-'.repeat(width))),
    ...lines.map(row),
    '',
    ...report.facts.map(([what, value]) => `${what.padEnd(widest)}  ${value}`),
    '',
    report.failures.length === 0
      ? 'Nothing was lost, doubled or changed.'
      : `${report.failures.length} FAILURES (seed ${report.seed}):`,
    ...shownFailures.map((failure) => `  ${failure}`),
  ].join('\n')
}
