import type { EntityManager } from '@mikro-orm/postgresql'
import { FiringProbeEntity } from '@/entities/firing-probe'
import type { Firing } from '@/entities/firing'
import type { Probe } from '@/entities/probe'
import { ProbeEntity } from '@/entities/probe'
import { AppError, invalidField } from '@/lib/errors'

export type Swap = { role: 'lead' | 'opposite' | 'coals'; probeId: string; isAtSamePlace: boolean }
export type DoneSwap = { fromProbeId: string; toProbeId: string; words: string }

type Place = { height: string; side: string; depthMm: number; mounting: string }

/**
 * Lets another probe read a role of a live firing from an instant on. In the same place it goes on as the one before;
 * elsewhere the place that is recorded for it stands, and a lead that has moved is not scored (SCIENCE §5).
 * @throws AppError 'invalid' naming role, probe or time; 'conflict' when nothing reads that role
 */
export async function swapProbe(em: EntityManager, firing: Firing, swap: Swap, at: Date): Promise<DoneSwap> {
  const current = await em.findOne(FiringProbeEntity, {
    firingId: firing.id,
    role: swap.role,
    untilAt: null,
  })
  if (current === null) throw new AppError('conflict', `This firing has no ${swap.role} probe to swap.`)
  if (current.probeId === swap.probeId) throw invalidField('probeId', 'This probe reads it already.')
  if (at <= current.fromAt) {
    throw invalidField('at', 'The probe that is swapped was put in later than this. Give a later time.')
  }
  const [before, after] = [
    await em.findOneOrFail(ProbeEntity, { id: current.probeId }),
    await em.findOne(ProbeEntity, { id: swap.probeId, retiredAt: null }),
  ]
  if (after === null) throw invalidField('probeId', 'Choose a probe that is in use.')
  await requireFree(em, after)
  const place = swap.isAtSamePlace ? placeOf(current) : placeOf(after)
  em.assign(current, { untilAt: at })
  await em.flush()
  em.create(FiringProbeEntity, {
    firingId: firing.id,
    probeId: after.id,
    role: swap.role,
    ...place,
    fromAt: at,
  })
  await em.flush()
  return {
    fromProbeId: before.id,
    toProbeId: after.id,
    words: `${swap.role}: ${before.name} out, ${after.name} in${placeWords(placeOf(current), place)}`,
  }
}

async function requireFree(em: EntityManager, probe: Probe): Promise<void> {
  const live = await em.findOne(FiringProbeEntity, { probeId: probe.id, untilAt: null })
  if (live !== null) throw invalidField('probeId', `${probe.name} reads a live firing. Choose another.`)
}

/** A place as it is stored: doubles may come as text. */
type StoredPlace = Omit<Place, 'depthMm'> & { depthMm: number | string }

function placeOf({ height, side, depthMm, mounting }: StoredPlace): Place {
  return { height, side, depthMm: Number(depthMm), mounting }
}

function placeWords(before: Place, after: Place): string {
  const isSame =
    before.height === after.height &&
    before.side === after.side &&
    before.depthMm === after.depthMm &&
    before.mounting === after.mounting
  return isSame
    ? ', same place'
    : `, now at ${after.height}, side ${after.side}, ${after.depthMm} mm, ${after.mounting}`
}
