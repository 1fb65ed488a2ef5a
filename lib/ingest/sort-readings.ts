import type { CommittedRows } from '@/lib/live/hub-door'
import type { Refusal } from '@/lib/gateway/protocol'
import type { RawReading } from '@/lib/ingest/read-envelope'
import type { ReadingCells } from '@/lib/ingest/read-reading'
import { readReading } from '@/lib/ingest/read-reading'
import type { SeqRanges } from '@/lib/ingest/seq-ranges'
import { hasSeq } from '@/lib/ingest/seq-ranges'

/** Instants later than this beyond the server's clock (once the gateway's offset is applied) are refused. */
export const futureAllowanceMs = 5_000
/** Older instants are taken only from a gateway that may replay. */
export const oldestMs = 48 * 3600 * 1000
/** Even a replay does not reach further back, so that no gateway can ask for a partition a day since 1970. */
export const oldestReplayMs = 10 * 366 * 24 * 3600 * 1000

/** A probe as ingest knows it; `isOwn` false: it belongs to another gateway. */
export type KnownProbe = { no: number; isOwn: boolean; isRetired: boolean }

export type SortContext = {
  received: SeqRanges
  probes: ReadonlyMap<string, KnownProbe>
  /** Added to the gateway's instants. */
  clockOffsetMs: number
  nowMs: number
  mayReplay: boolean
}

export type RefusedReading = Refusal & { reading: RawReading }

export type SortedReadings = {
  /** New and right, in the message's order; instants corrected by the clock offset. */
  seqs: number[]
  rows: CommittedRows
  /** Whole days since 1970 UTC on which the rows lie. */
  days: Set<number>
  refused: RefusedReading[]
  hasTemps: boolean
  hasEmfs: boolean
  hasFlags: boolean
}

const dayMs = 86_400_000

/**
 * Splits the readings of one message into those to store and those to refuse by name. What was received before is
 * passed over, whatever it says now. Of two readings with one number the first stands; a second that says the same
 * is a repeat, one that says something else is refused.
 */
export function sortReadings(readings: readonly RawReading[], context: SortContext): SortedReadings {
  const sorted = emptySorted()
  const cells: ReadingCells = {
    probeId: '',
    atMs: 0,
    emfTenthUv: null,
    coldCentiC: null,
    tempCentiC: null,
    flag: 0,
  }
  let highest = -1
  let seen: Map<number, RawReading> | null = null
  for (let i = 0; i < readings.length; i += 1) {
    const reading = readings[i]
    if (reading === undefined || hasSeq(context.received, reading.seq)) continue
    if (reading.seq <= highest) {
      seen ??= new Map(
        readings
          .slice(0, i)
          .toReversed()
          .map((earlier) => [earlier.seq, earlier]),
      )
      const first = seen.get(reading.seq)
      if (first !== undefined) {
        if (!saysTheSame(first, reading))
          refuse(sorted, reading, 'this number came twice with different content')
        continue
      }
    }
    seen?.set(reading.seq, reading)
    highest = Math.max(highest, reading.seq)
    takeOrRefuse(sorted, reading, cells, context)
  }
  return sorted
}

function takeOrRefuse(
  sorted: SortedReadings,
  reading: RawReading,
  cells: ReadingCells,
  context: SortContext,
): void {
  const fault = readReading(reading, cells)
  if (fault !== null) {
    refuse(sorted, reading, fault)
    return
  }
  const probe = context.probes.get(cells.probeId)
  if (probe === undefined) refuse(sorted, reading, 'no probe has this probeId')
  else if (!probe.isOwn) refuse(sorted, reading, 'this probe belongs to another gateway')
  else if (probe.isRetired) refuse(sorted, reading, 'this probe is retired')
  else {
    const atMs = cells.atMs + context.clockOffsetMs
    const late = instantFault(atMs, context)
    if (late === null) take(sorted, reading.seq, probe.no, atMs, cells)
    else refuse(sorted, reading, late)
  }
}

function instantFault(atMs: number, context: SortContext): string | null {
  if (atMs > context.nowMs + futureAllowanceMs) {
    return 'at: more than 5 s in the future, with the clock offset applied'
  }
  if (atMs < context.nowMs - (context.mayReplay ? oldestReplayMs : oldestMs)) {
    return context.mayReplay
      ? 'at: more than 10 years old'
      : 'at: more than 48 h old; only a gateway registered for replay may send it'
  }
  return null
}

function take(sorted: SortedReadings, seq: number, probeNo: number, atMs: number, cells: ReadingCells): void {
  const { rows } = sorted
  sorted.seqs.push(seq)
  rows.probeNo.push(probeNo)
  rows.atMs.push(atMs)
  rows.emfTenthUv.push(cells.emfTenthUv)
  rows.coldCentiC.push(cells.coldCentiC)
  rows.tempCentiC.push(cells.tempCentiC)
  rows.flag.push(cells.flag)
  sorted.days.add(Math.floor(atMs / dayMs))
  if (cells.tempCentiC !== null) sorted.hasTemps = true
  if (cells.emfTenthUv !== null) sorted.hasEmfs = true
  if (cells.flag > 0) sorted.hasFlags = true
}

function refuse(sorted: SortedReadings, reading: RawReading, reason: string): void {
  sorted.refused.push({ seq: reading.seq, reason, reading })
}

function saysTheSame(first: RawReading, second: RawReading): boolean {
  return canonical(first) === canonical(second)
}

/** JSON with its keys in order, so that two readings are compared by what they say. */
function canonical(value: unknown): string {
  return JSON.stringify(value, (_key, part: unknown) =>
    typeof part === 'object' && part !== null && !Array.isArray(part)
      ? Object.fromEntries(Object.entries(part).sort(([a], [b]) => (a < b ? -1 : 1)))
      : part,
  )
}

function emptySorted(): SortedReadings {
  return {
    seqs: [],
    rows: { probeNo: [], atMs: [], emfTenthUv: [], coldCentiC: [], tempCentiC: [], flag: [] },
    days: new Set(),
    refused: [],
    hasTemps: false,
    hasEmfs: false,
    hasFlags: false,
  }
}
