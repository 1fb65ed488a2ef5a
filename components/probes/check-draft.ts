import type { ProbeCheckDto } from '@/lib/probes/schema'
import { altitudeUncertaintyC, eyeResolutionC, liveResolutionC } from '@/lib/probes/check-points'
import { toCheckRow } from '@/lib/probes/to-check-row'
import { checkUncertaintyC } from '@/lib/science/check-uncertainty'
import { probeCorrectionAt, referenceUncertaintyC } from '@/lib/science/probe-correction'
import { boilingPointC, standardPressurePa } from '@/lib/science/steam'

export type CheckKind = ProbeCheckDto['kind']

/** What was read: the probe's own settled window, or a figure by eye. */
export type Taken =
  { way: 'live'; takenAt: string; meanC: number; sdC: number } | { way: 'by hand'; tempC: number }

/** What a person has chosen and typed so far; null is not yet. */
export type CheckDraft = {
  kind: CheckKind | null
  by: 'pressure' | 'altitude'
  stationPressureHpa: number | null
  altitudeM: number | null
  referenceTempC: number | null
  referenceHalfC: number | null
  taken: Taken | null
  /** YYYY-MM-DD; empty: the site's usual time. */
  dueOn: string
}

export const emptyDraft: CheckDraft = {
  kind: null,
  by: 'pressure',
  stationPressureHpa: null,
  altitudeM: null,
  referenceTempC: null,
  referenceHalfC: null,
  taken: null,
  dueOn: '',
}

/** What the reference stands at, °C; null while something is missing or out of its bounds. */
export function referenceOf(draft: CheckDraft): number | null {
  if (draft.kind === 'ice') return 0
  if (draft.kind === 'block') {
    const isGiven = draft.referenceTempC !== null && draft.referenceHalfC !== null && draft.referenceHalfC > 0
    return isGiven ? draft.referenceTempC : null
  }
  const pressureHpa = pressureOf(draft)
  return draft.kind === null || pressureHpa === null ? null : boilingPointC(pressureHpa)
}

/** The station pressure that holds, hPa, read or from the altitude. */
export function pressureOf({ by, stationPressureHpa, altitudeM }: CheckDraft): number | null {
  if (by === 'pressure') return within(stationPressureHpa, 500, 1100)
  const heightM = within(altitudeM, -500, 5000)
  return heightM === null ? null : standardPressurePa(heightM) / 100
}

function within(value: number | null, low: number, high: number): number | null {
  return value !== null && value >= low && value <= high ? value : null
}

export type CheckResult = {
  referenceTempC: number
  measuredTempC: number
  correctionC: number
  /** Of the comparison, as it is stored; k = 2. */
  comparisonC: number
  /** With the ice bath's or the barometer's own, k = 2. */
  wholeC: number
}

/** What the check says, as the server will work it out; null while something is missing. */
export function resultOf(draft: CheckDraft): CheckResult | null {
  const { kind, taken } = draft
  const referenceTempC = referenceOf(draft)
  if (kind === null || taken === null || referenceTempC === null) return null
  const measuredTempC = taken.way === 'live' ? taken.meanC : taken.tempC
  const comparisonC = checkUncertaintyC(
    furtherReferenceC(draft),
    taken.way === 'live' ? taken.sdC : 0,
    taken.way === 'live' ? liveResolutionC : eyeResolutionC,
  )
  return {
    referenceTempC,
    measuredTempC,
    correctionC: referenceTempC - measuredTempC,
    comparisonC,
    wholeC: Math.hypot(comparisonC, referenceUncertaintyC(kind, referenceTempC)),
  }
}

function furtherReferenceC({ kind, by, referenceHalfC }: CheckDraft): number {
  if (kind === 'block') return referenceHalfC ?? 0
  return kind === 'boiling' && by === 'altitude' ? altitudeUncertaintyC : 0
}

export type Effect = { beforeC: number; afterC: number; halfC: number | null }

/** What a reading is corrected to, before this check and with it. */
export function effectAt(
  readingC: number,
  checks: readonly ProbeCheckDto[],
  kind: CheckKind,
  result: CheckResult,
  nowMs: number,
): Effect {
  const rows = checks.map(toCheckRow)
  const added = {
    kind,
    referenceTempC: result.referenceTempC,
    measuredTempC: result.measuredTempC,
    uncertaintyC: result.comparisonC,
    checkedAtMs: nowMs,
    dueAtMs: nowMs + 86_400_000,
  }
  const before = probeCorrectionAt(rows, nowMs)
  const after = probeCorrectionAt([...rows, added], nowMs)
  return {
    beforeC: readingC + before.correctionC(readingC),
    afterC: readingC + after.correctionC(readingC),
    halfC: after.uncertaintyC(readingC),
  }
}

/** The body of the request; the server takes live readings from what it has stored. */
export function bodyOf(draft: CheckDraft): Record<string, unknown> {
  const { kind, by, taken, dueOn } = draft
  return {
    kind,
    ...(kind === 'boiling' && by === 'pressure' ? { stationPressureHpa: draft.stationPressureHpa } : {}),
    ...(kind === 'boiling' && by === 'altitude' ? { altitudeM: draft.altitudeM } : {}),
    ...(kind === 'block'
      ? { referenceTempC: draft.referenceTempC, referenceUncertaintyC: draft.referenceHalfC }
      : {}),
    ...(taken?.way === 'live' ? { takenAt: taken.takenAt } : {}),
    ...(taken?.way === 'by hand' ? { measuredTempC: taken.tempC } : {}),
    ...(dueOn === '' ? {} : { dueAt: new Date(`${dueOn}T12:00:00`).toISOString() }),
  }
}
