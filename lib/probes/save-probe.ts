import type { EntityManager } from '@mikro-orm/postgresql'
import type * as z from 'zod'
import { GatewayEntity } from '@/entities/gateway'
import { HearthEntity } from '@/entities/hearth'
import type { Probe } from '@/entities/probe'
import { ProbeEntity } from '@/entities/probe'
import { describeChanges } from '@/lib/audit/describe-changes'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import type { saveProbeSchema } from '@/lib/probes/schema'
import { now } from '@/lib/runtime'

type Fields = z.infer<typeof saveProbeSchema>

/**
 * Adds a probe, or changes the one with the id; one that reads a live firing cannot be moved. Where it was before is
 * kept by the database, with who changed it and when.
 */
export async function saveProbe(actor: Actor, input: Fields & { id?: string }): Promise<{ id: string }> {
  requirePermission(actor, 'room:write')
  const { id, ...fields } = input
  const by = { changedAt: now(), changedBy: actor.kind === 'person' ? actor.accountId : null }
  return inTransaction(async (em) => {
    await requireFreePlace(em, input)
    const probe = id === undefined ? null : await em.findOne(ProbeEntity, { id })
    if (id !== undefined && probe === null) throw new AppError('not found', 'There is no such probe.')
    if (probe !== null) await requireChangeable(em, probe, fields)
    const changes = probe === null ? fields : describeChanges(fieldsOf(probe), fields)
    const saved = probe ?? em.create(ProbeEntity, { ...fields, ...by, createdAt: by.changedAt })
    if (probe !== null) em.assign(probe, { ...fields, ...by })
    await em.persistAndFlush(saved)
    await writeAuditEntry(
      em,
      actor,
      probe === null ? 'probe.added' : 'probe.changed',
      { type: 'probe', id: saved.id },
      changes,
    )
    return { id: saved.id }
  })
}

async function requireFreePlace(em: EntityManager, input: Fields & { id?: string }): Promise<void> {
  const gateway = await em.findOne(GatewayEntity, { id: input.gatewayId })
  if (gateway === null) throw invalidField('gatewayId', 'Choose a gateway from the list.')
  if (gateway.retiredAt) throw invalidField('gatewayId', `${gateway.name} is retired. Choose another.`)
  if (input.hearthId !== null && (await em.findOne(HearthEntity, { id: input.hearthId })) === null) {
    throw invalidField('hearthId', 'Choose a hearth from the list.')
  }
  const twin = await em.findOne(ProbeEntity, {
    gatewayId: input.gatewayId,
    channel: input.channel,
    retiredAt: null,
  })
  if (twin !== null && twin.id !== input.id)
    throw invalidField('channel', `${twin.name} is on this channel already.`)
}

async function requireChangeable(em: EntityManager, probe: Probe, fields: Fields): Promise<void> {
  if (probe.retiredAt) throw new AppError('conflict', `${probe.name} is retired: it stays as it was.`)
  const [used] = await queryRows<{ is_live: boolean }>(
    em,
    'select bool_or(until_at is null) as is_live from firing_probes where probe_id = ? having count(*) > 0',
    [probe.id],
  )
  if (used === undefined) return
  if (used.is_live) throw new AppError('conflict', 'This probe reads a live firing. Finish that first.')
  // Past firings are read by its type and judged by its class; another thermocouple is another probe.
  const sentence =
    'It has read firings as it was. Retire it, and add the new thermocouple as a probe of its own.'
  if (probe.thermocoupleType !== fields.thermocoupleType) throw invalidField('thermocoupleType', sentence)
  if (probe.iecClass !== fields.iecClass) throw invalidField('iecClass', sentence)
}

function fieldsOf(probe: Probe): Fields {
  return {
    name: probe.name,
    gatewayId: probe.gatewayId,
    channel: probe.channel,
    thermocoupleType: probe.thermocoupleType,
    iecClass: probe.iecClass,
    serial: probe.serial,
    hearthId: probe.hearthId ?? null,
    usualRole: probe.usualRole,
    height: probe.height,
    side: probe.side,
    depthMm: Number(probe.depthMm),
    mounting: probe.mounting,
  }
}
