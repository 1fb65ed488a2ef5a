import type { EntityManager } from '@mikro-orm/postgresql'
import { FiringProbeEntity } from '@/entities/firing-probe'
import type { StartProbe } from '@/lib/firings/check-start'

/** Gives a firing its probes from an instant on, each at the place where it sits. */
export function addFiringProbes(
  em: EntityManager,
  firingId: string,
  probes: readonly StartProbe[],
  at: Date,
): void {
  for (const probe of probes) {
    em.create(FiringProbeEntity, {
      firingId,
      probeId: probe.id,
      role: probe.role,
      height: probe.height,
      side: probe.side,
      depthMm: probe.depth_mm,
      mounting: probe.mounting,
      fromAt: at,
    })
  }
}
