import type { Actor } from '@/lib/auth/actor'
import { forkEm } from '@/lib/db/orm'
import { getFiring } from '@/lib/firings/get-firing'
import type { CsvFile } from '@/lib/http/csv-response'
import { csvLine } from '@/lib/http/csv-response'
import { convertReading } from '@/lib/ingest/convert-reading'
import type { RawFiringReadings } from '@/lib/ingest/firing-readings'
import { rawFiringReadings } from '@/lib/ingest/firing-readings'

const flagNames = ['', 'open', 'short', 'fault']

function* lines(raw: RawFiringReadings, zeroMs: number): Iterable<string> {
  yield csvLine([
    'probe',
    'role',
    'at_utc',
    'seconds_from_toast_start',
    'emf_uv',
    'cold_junction_c',
    'reported_temp_c',
    'flag',
    'corrected_temp_c',
  ])
  for (const { assignment, columns } of raw.probes) {
    for (let i = 0; i < columns.atMs.length; i += 1) {
      const atMs = columns.atMs[i] ?? 0
      const emf = columns.emfTenthUv[i] ?? null
      const cold = columns.coldCentiC[i] ?? null
      const temp = columns.tempCentiC[i] ?? null
      const flag = columns.flag[i] ?? 0
      const correctedC = convertReading(assignment.conversion, emf, cold, temp, flag)
      yield csvLine([
        assignment.probeName,
        assignment.role,
        new Date(atMs).toISOString(),
        (atMs - zeroMs) / 1000,
        emf === null ? null : emf / 10,
        cold === null ? null : cold / 100,
        temp === null ? null : temp / 100,
        flagNames[flag] ?? '',
        Number.isNaN(correctedC) ? null : Number(correctedC.toFixed(3)),
      ])
    }
  }
}

/** Every reading of a firing as it was stored, with the corrected temperature beside it. */
export async function exportReadings(actor: Actor, input: { id: string }): Promise<CsvFile> {
  const firing = await getFiring(actor, input)
  const raw = await rawFiringReadings(await forkEm(), firing.id)
  const zeroMs = Date.parse(firing.toastAt ?? firing.preheatAt ?? firing.queuedAt)
  return { fileName: `${firing.piece.serial}-readings.csv`, rows: lines(raw, zeroMs) }
}
