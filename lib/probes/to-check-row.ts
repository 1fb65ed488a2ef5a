import type { ProbeCheckDto } from '@/lib/probes/schema'
import type { CheckRow } from '@/lib/science/probe-correction'

/** A check as the correction reads it. */
export function toCheckRow(
  check: Pick<
    ProbeCheckDto,
    'kind' | 'referenceTempC' | 'measuredTempC' | 'uncertaintyC' | 'checkedAt' | 'dueAt'
  >,
): CheckRow {
  return {
    kind: check.kind,
    referenceTempC: check.referenceTempC,
    measuredTempC: check.measuredTempC,
    uncertaintyC: check.uncertaintyC,
    checkedAtMs: Date.parse(check.checkedAt),
    dueAtMs: Date.parse(check.dueAt),
  }
}
