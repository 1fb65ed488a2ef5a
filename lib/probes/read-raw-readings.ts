import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { convertReading } from '@/lib/ingest/convert-reading'
import { readHot } from '@/lib/ingest/read-hot'
import { probeCorrectionAt } from '@/lib/science/probe-correction'
import type { ThermocoupleType } from '@/lib/science/thermocouple'

export type RawReadings = {
  /** Ms since 1970 UTC, rising. */
  atMs: number[]
  /** °C as the thermocouple gives it, without its correction; NaN: no reading. */
  tempC: number[]
}

/** What one probe gave between two instants (start left out, end included), uncorrected. @throws AppError 'not found' */
export async function readRawReadings(
  em: EntityManager,
  probeId: string,
  afterMs: number,
  untilMs: number,
): Promise<RawReadings> {
  const [probe] = await queryRows<{ no: number; thermocouple_type: ThermocoupleType }>(
    em,
    'select no, thermocouple_type from probes where id = ?',
    [probeId],
  )
  if (probe === undefined) throw new AppError('not found', 'There is no such probe.')
  const columns = await readHot(em, probe.no, [{ fromMs: afterMs + 1, untilMs: untilMs + 1 }])
  const conversion = { type: probe.thermocouple_type, correction: probeCorrectionAt([], 0) }
  return {
    atMs: [...columns.atMs],
    tempC: columns.atMs.map((_, i) =>
      convertReading(
        conversion,
        columns.emfTenthUv[i] ?? null,
        columns.coldCentiC[i] ?? null,
        columns.tempCentiC[i] ?? null,
        columns.flag[i] ?? 0,
      ),
    ),
  }
}
