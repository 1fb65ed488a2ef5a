import { randomUUID } from 'node:crypto'
import type { EntityManager } from '@mikro-orm/postgresql'
import type * as z from 'zod'
import type { Firing } from '@/entities/firing'
import { FiringPlacementEntity } from '@/entities/firing-placement'
import { FiringProbeEntity } from '@/entities/firing-probe'
import type { Hearth } from '@/entities/hearth'
import { HearthEntity } from '@/entities/hearth'
import { MarkEntity } from '@/entities/mark'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor, PersonActor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import { addFiringProbes } from '@/lib/firings/add-firing-probes'
import type { StartProbe } from '@/lib/firings/check-start'
import { findLeadFaults, findStartProbes, requireSamePlace } from '@/lib/firings/check-start'
import { explainClash } from '@/lib/firings/explain-clash'
import { lockFiring } from '@/lib/firings/lock-firing'
import { markInstant } from '@/lib/firings/mark-instant'
import { readFiring } from '@/lib/firings/read-firing'
import type { FiringDto, moveFiringSchema } from '@/lib/firings/schema'
import { signOverride } from '@/lib/firings/sign-override'
import { notifyFiringChanged } from '@/lib/live/notify'
import { recipeCopySchema } from '@/lib/recipes/schema'
import { now } from '@/lib/runtime'

type Input = z.infer<typeof moveFiringSchema> & { id: string }

/**
 * Moves a rose to another hearth before its toast: that hearth's probes take the roles, the lead at the place that the
 * recipe is written for. Once it toasts it stays where it is.
 * @throws AppError 'conflict' once it toasts or when it stands there already; 'invalid' for a hearth that is taken
 */
export async function moveFiring(actor: Actor, input: Input): Promise<FiringDto> {
  requirePermission(actor, 'firings:run trial')
  const person = requirePerson(actor)
  const firing = await inTransaction((em) => move(em, person, input)).catch(explainClash)
  notifyFiringChanged(firing.id, 'placement')
  return firing
}

async function move(em: EntityManager, person: PersonActor, input: Input): Promise<FiringDto> {
  const firing = await lockFiring(em, input.id)
  if (!firing.isTrial) requirePermission(person, 'firings:run')
  if (firing.state !== 'preheating' && firing.state !== 'bending') {
    throw new AppError('conflict', `A firing that is ${firing.state} stays on its hearth.`)
  }
  const { from, to } = await findHearths(em, firing, input.hearthId)
  const probes = await findStartProbes(em, to.id, input.probes)
  const lead = probes.find((probe) => probe.role === 'lead')
  if (lead === undefined) throw invalidField('probes.lead', 'A firing needs its lead probe.')
  requireSamePlace(lead, recipeCopySchema.parse(firing.recipeCopy).content.leadPlace)
  const at = markInstant(input.at, { notBefore: firing.bendAt ?? firing.preheatAt })
  await signOverride(em, person, input.override, await findLeadFaults(em, lead, at), {
    id: firing.id,
    sha256: firing.recipeSha256 ?? '',
  })
  await endPeriods(em, firing.id, at)
  em.create(FiringPlacementEntity, { firingId: firing.id, hearthId: to.id, fromAt: at })
  // First, so that a taken hearth is named as such and not by its probes.
  await em.flush()
  addFiringProbes(em, firing.id, probes, at)
  await addMoveMark(em, person, firing, { from, to, probes }, at)
  em.assign(firing, { revision: firing.revision + 1 })
  await em.flush()
  await writeAuditEntry(
    em,
    person,
    'firing.moved',
    { type: 'firing', id: firing.id },
    { from: from.number, to: to.number, probes: probes.map((probe) => `${probe.role}: ${probe.name}`) },
  )
  return readFiring(em, firing.id)
}

async function findHearths(
  em: EntityManager,
  firing: Firing,
  hearthId: string,
): Promise<{ from: Hearth; to: Hearth }> {
  const to = await em.findOne(HearthEntity, { id: hearthId })
  if (to === null || !to.isActive) throw invalidField('hearthId', 'Choose a hearth that is in use.')
  const placement = await em.findOne(FiringPlacementEntity, { firingId: firing.id, untilAt: null })
  if (placement === null) throw new AppError('conflict', 'This firing stands on no hearth.')
  if (placement.hearthId === to.id) {
    throw new AppError('conflict', `This firing stands on hearth ${to.number} already.`)
  }
  return { from: await em.findOneOrFail(HearthEntity, { id: placement.hearthId }), to }
}

/** @throws AppError 'invalid' when something of the firing began later than this */
async function endPeriods(em: EntityManager, firingId: string, at: Date): Promise<void> {
  const probes = await em.find(FiringProbeEntity, { firingId, untilAt: null })
  const placements = await em.find(FiringPlacementEntity, { firingId, untilAt: null })
  for (const period of [...probes, ...placements]) {
    if (at <= period.fromAt)
      throw invalidField('at', 'It came to its hearth later than this. Give a later time.')
    em.assign(period, { untilAt: at })
  }
  await em.flush()
}

type Move = { from: Hearth; to: Hearth; probes: readonly StartProbe[] }

async function addMoveMark(
  em: EntityManager,
  person: PersonActor,
  firing: Firing,
  { from, to, probes }: Move,
  at: Date,
): Promise<void> {
  const names = await queryRows<{ role: string; name: string }>(
    em,
    `select fp.role, p.name from firing_probes fp join probes p on p.id = fp.probe_id
      where fp.firing_id = ? and fp.until_at = ?`,
    [firing.id, at],
  )
  const changes = probes.map((probe) => {
    const before = names.find(({ role }) => role === probe.role)
    return before === undefined
      ? `${probe.role} ${probe.name}`
      : `${probe.role} ${before.name} to ${probe.name}`
  })
  em.create(MarkEntity, {
    id: randomUUID(),
    firingId: firing.id,
    kind: 'move',
    at,
    recordedAt: now(),
    accountId: person.accountId,
    words: `hearth ${from.number} to hearth ${to.number}; ${changes.join(', ')}`,
    fromHearthId: from.id,
    toHearthId: to.id,
  })
}
