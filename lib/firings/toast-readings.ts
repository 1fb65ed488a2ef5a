import type { EntityManager } from '@mikro-orm/postgresql'
import type { FiringReadings } from '@/lib/ingest/firing-readings'
import { firingReadings } from '@/lib/ingest/firing-readings'

/** Enough before the toast for the curve's value at its start, ms. */
const beforeToastMs = 60_000

/** What a picture needs of a firing's readings: both wood probes, from shortly before the toast on. */
export async function toastReadings(
  em: EntityManager,
  firingId: string,
  toastAt: string,
): Promise<FiringReadings> {
  return firingReadings(em, firingId, undefined, {
    roles: ['lead', 'opposite'],
    fromMs: Date.parse(toastAt) - beforeToastMs,
  })
}
