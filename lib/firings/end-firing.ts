import type { EntityManager } from '@mikro-orm/postgresql'
import type { Firing } from '@/entities/firing'
import { endFiringAlarms } from '@/lib/alarms/end-firing-alarms'
import { queryRows } from '@/lib/db/orm'

/** Frees the hearth and the probes at the firing's end, and puts away its alarms that are still on. */
export async function closePeriods(em: EntityManager, firing: Firing, at: Date): Promise<void> {
  await em.flush()
  for (const table of ['firing_placements', 'firing_probes']) {
    await queryRows(
      em,
      `update ${table} set until_at = greatest(from_at, ?) where firing_id = ? and until_at is null`,
      [at, firing.id],
    )
  }
  await endFiringAlarms(em, firing.id, at)
}
