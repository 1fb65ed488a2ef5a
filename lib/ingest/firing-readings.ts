import type { EntityManager } from '@mikro-orm/postgresql'
import { convertReading } from '@/lib/ingest/convert-reading'
import type { ProbeAssignment, ProbeRole } from '@/lib/ingest/firing-probes'
import { readFiringProbes } from '@/lib/ingest/firing-probes'
import { readHot } from '@/lib/ingest/read-hot'
import { readSealed } from '@/lib/ingest/read-sealed'
import { recordSpacingS } from '@/lib/science/record-spacing'
import type { ReadingColumns } from '@/lib/ingest/reading-columns'
import { appendRow, emptyColumns } from '@/lib/ingest/reading-columns'
import type { ReadingSeries } from '@/lib/science/gaps'

/** What one probe said in one period of a firing, in stored units. */
export type RawProbeReadings = { assignment: ProbeAssignment; columns: ReadingColumns }

export type RawFiringReadings = {
  /** Of the seal that was read; null when the readings came from the table. */
  sealRevision: number | null
  probes: RawProbeReadings[]
}

/** One role's curve over the whole firing, corrected, °C; NaN is no reading. */
export type FiringSeries = {
  role: ProbeRole
  /** The probes that read it, in time order; more than one after a swap. */
  assignments: ProbeAssignment[]
  /** Ms since 1970 UTC, rising. */
  atMs: Float64Array
  tempC: Float64Array
  /** Nominal time between readings, s. */
  spacingS: number
}

/** For a picture: some roles, and nothing converted before an instant (NaN stands there). Left out: everything. */
export type WantedReadings = { roles?: readonly ProbeRole[]; fromMs?: number }

export type FiringReadings = { sealRevision: number | null; series: FiringSeries[] }

const allRoles: readonly ProbeRole[] = ['lead', 'opposite', 'coals']

/** A firing's readings as they are stored: from its newest seal, or from the table while there is none. */
export async function rawFiringReadings(
  em: EntityManager,
  firingId: string,
  sealRevision?: number,
  roles: readonly ProbeRole[] = allRoles,
): Promise<RawFiringReadings> {
  const assignments = (await readFiringProbes(em, firingId)).filter((one) => roles.includes(one.role))
  const probeIds = roles === allRoles ? undefined : assignments.map((one) => one.probeId)
  const sealed = await readSealed(em, firingId, sealRevision, probeIds)
  const probes: RawProbeReadings[] = []
  for (const assignment of assignments) {
    const columns =
      sealed === null
        ? await readHot(em, assignment.probeNo, [assignment])
        : clip(sealed.probes.get(assignment.probeId) ?? emptyColumns(), assignment)
    probes.push({ assignment, columns })
  }
  return { sealRevision: sealed?.revision ?? null, probes }
}

/**
 * A firing's curves by role, converted by SCIENCE §1: emf and cold junction, corrected by the probe's checks; NaN
 * where the probe was flagged or out of range. Clipped to each probe's periods in the firing. Of two readings of one
 * role at one instant the warmer stands, whatever order they came in.
 */
export async function firingReadings(
  em: EntityManager,
  firingId: string,
  sealRevision?: number,
  wanted: WantedReadings = {},
): Promise<FiringReadings> {
  const roles = wanted.roles ?? allRoles
  const raw = await rawFiringReadings(em, firingId, sealRevision, roles)
  const series = roles.flatMap((role) => {
    const parts = raw.probes.filter((probe) => probe.assignment.role === role)
    return parts.length === 0 ? [] : [joinParts(role, parts, wanted.fromMs ?? -Infinity)]
  })
  return { sealRevision: raw.sealRevision, series }
}

/** A role's curve on the firing's own time axis, s from the toast start. */
export function toReadingSeries(series: FiringSeries, toastAtMs: number): ReadingSeries {
  const timeS = new Float64Array(series.atMs.length)
  for (let i = 0; i < timeS.length; i += 1) timeS[i] = ((series.atMs[i] ?? NaN) - toastAtMs) / 1000
  return {
    timeS,
    tempC: series.tempC,
    spacingS: series.spacingS,
  }
}

function joinParts(role: ProbeRole, parts: readonly RawProbeReadings[], fromMs: number): FiringSeries {
  const atMs: number[] = []
  const tempC: number[] = []
  for (const { assignment, columns } of parts) {
    columns.atMs.forEach((at, i) => {
      const temp = at < fromMs ? NaN : convertRow(assignment, columns, i)
      if (at === atMs.at(-1)) tempC[tempC.length - 1] = warmer(tempC.at(-1) ?? NaN, temp)
      else {
        atMs.push(at)
        tempC.push(temp)
      }
    })
  }
  return {
    role,
    assignments: parts.map((part) => part.assignment),
    atMs: Float64Array.from(atMs),
    tempC: Float64Array.from(tempC),
    spacingS: recordSpacingS(atMs),
  }
}

/** The warmer of two, a number before none. */
export function warmer(a: number, b: number): number {
  if (Number.isNaN(a)) return b
  return b > a ? b : a
}

function convertRow(assignment: ProbeAssignment, columns: ReadingColumns, i: number): number {
  return convertReading(
    assignment.conversion,
    columns.emfTenthUv[i] ?? null,
    columns.coldCentiC[i] ?? null,
    columns.tempCentiC[i] ?? null,
    columns.flag[i] ?? 0,
  )
}

function clip(columns: ReadingColumns, period: { fromMs: number; untilMs: number }): ReadingColumns {
  const first = columns.atMs[0] ?? period.fromMs
  // A probe that was not swapped read the whole period: nothing to copy.
  if (first >= period.fromMs && (columns.atMs.at(-1) ?? first) < period.untilMs) return columns
  const clipped = emptyColumns()
  columns.atMs.forEach((atMs, i) => {
    if (atMs >= period.fromMs && atMs < period.untilMs) appendRow(clipped, columns, i)
  })
  return clipped
}
