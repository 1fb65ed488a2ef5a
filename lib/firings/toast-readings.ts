import type { EntityManager } from '@mikro-orm/postgresql'
import { needsCoals } from '@/lib/ingest/checked-readings'
import type { FiringReadings } from '@/lib/ingest/firing-readings'
import { firingReadings } from '@/lib/ingest/firing-readings'
import type { SignalRules } from '@/lib/science/signal-trouble'

/** Enough before the toast for the curve's value at its start, ms. */
const beforeToastMs = 60_000

/**
 * What a picture needs of a firing's readings: both wood probes, from shortly before the toast on, and the coals when
 * one of them stood still.
 */
export async function toastReadings(
  em: EntityManager,
  firingId: string,
  toastAt: string,
  rules: SignalRules,
): Promise<FiringReadings> {
  const fromMs = Date.parse(toastAt) - beforeToastMs
  const wood = await firingReadings(em, firingId, undefined, { roles: ['lead', 'opposite'], fromMs })
  if (!needsCoals(wood, rules)) return wood
  const coals = await firingReadings(em, firingId, undefined, { roles: ['coals'], fromMs })
  return { ...wood, series: [...wood.series, ...coals.series] }
}
