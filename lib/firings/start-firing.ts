import type { EntityManager } from '@mikro-orm/postgresql'
import type * as z from 'zod'
import type { Firing } from '@/entities/firing'
import { FiringEntity } from '@/entities/firing'
import { FiringPlacementEntity } from '@/entities/firing-placement'
import { FiringProbeEntity } from '@/entities/firing-probe'
import { HearthEntity } from '@/entities/hearth'
import { PieceEntity } from '@/entities/piece'
import { BatchEntity } from '@/entities/batch'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor, PersonActor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { signAs } from '@/lib/auth/sign'
import { violatedConstraint } from '@/lib/db/database-errors'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import type { OutOfDate, StartProbe } from '@/lib/firings/check-start'
import { findOutOfDate, findStartProbes, refuseOutOfDate, requireSamePlace } from '@/lib/firings/check-start'
import { markInstant } from '@/lib/firings/mark-instant'
import { readFiring } from '@/lib/firings/read-firing'
import type { FiringDto, startFiringSchema } from '@/lib/firings/schema'
import { notifyFiringChanged } from '@/lib/live/notify'
import { readVersion } from '@/lib/recipes/read-version'
import { recipeCopyOf } from '@/lib/recipes/recipe-copy'
import type { RecipeVersionDto } from '@/lib/recipes/schema'
import { now } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

type Input = z.infer<typeof startFiringSchema>

/** How long ago a start may be marked, unless the lead probe's gateway may replay the past (imports, seeds, tests). */
const startedAtMostAgoS = 600

function startInstant(input: Input, lead: StartProbe): Date {
  const notBefore = lead.may_replay ? null : new Date(now().getTime() - startedAtMostAgoS * 1000)
  return markInstant(input.at, { notBefore })
}

/** Starts preheat: copies the recipe whole, places the piece on a hearth and gives it its probes. */
export async function startFiring(actor: Actor, input: Input): Promise<FiringDto> {
  requirePermission(actor, input.isTrial ? 'firings:run trial' : 'firings:run')
  const person = requirePerson(actor)
  const firing = await begin(person, input).catch(explainClash)
  notifyFiringChanged(firing.id, 'started')
  return firing
}

async function begin(person: PersonActor, input: Input): Promise<FiringDto> {
  return inTransaction(async (em) => {
    const { firing, version } = await takePiece(em, input)
    const hearth = await em.findOne(HearthEntity, { id: input.hearthId })
    if (hearth === null || !hearth.isActive) throw invalidField('hearthId', 'Choose a hearth that is in use.')
    const probes = await findStartProbes(em, hearth.id, input.probes)
    const lead = probes.find((probe) => probe.role === 'lead')
    if (lead === undefined) throw invalidField('probes.lead', 'A firing needs its lead probe.')
    requireSamePlace(lead, version.content.leadPlace)
    const at = startInstant(input, lead)
    const outOfDate = await findOutOfDate(em, lead, at, input.waterSource)
    const { copy, sha256 } = recipeCopyOf(version)
    await signOverride(em, person, input, outOfDate, { id: firing.id, sha256 })
    em.assign(firing, {
      state: 'preheating',
      recipeCopy: copy,
      recipeSha256: sha256,
      preheatAt: at,
      toasterId: person.accountId,
      siteSettingsVersion: (await currentSite(em)).version,
      waterCheckId: outOfDate.waterCheckId,
      moisturePercent: input.moisturePercent,
      moistureMethod: input.moisturePercent === null ? null : (input.moistureMethod ?? 'meter'),
      isTrial: input.isTrial,
      isFirstOfDay: await isFirstOfDay(em, at),
    })
    em.create(FiringPlacementEntity, { firingId: firing.id, hearthId: hearth.id, fromAt: at })
    // First, so that a taken hearth is named as such and not by its probes.
    await em.flush()
    addProbes(em, firing.id, probes, at)
    await em.flush()
    await writeAuditEntry(
      em,
      person,
      'firing.started',
      { type: 'firing', id: firing.id },
      {
        hearth: hearth.number,
        recipeSha256: sha256,
        isStartListDone: input.isStartListDone,
        overridden: outOfDate.faults,
      },
    )
    return readFiring(em, firing.id)
  })
}

/** The piece's queued firing, or a new one when it is fired again; with the version that the batch pins. */
async function takePiece(
  em: EntityManager,
  input: Input,
): Promise<{ firing: Firing; version: RecipeVersionDto }> {
  const piece = await em.findOne(PieceEntity, { id: input.pieceId })
  if (piece === null) throw invalidField('pieceId', 'Choose a barrel from the queue.')
  const batch = await em.findOneOrFail(BatchEntity, { id: piece.batchId })
  const version = await readVersion(em, batch.recipeVersionId)
  if (version.state !== 'approved' && version.state !== 'superseded') {
    throw new AppError(
      'conflict',
      `Version ${version.number} of ${version.recipeName} is ${version.state}: it is not fired.`,
    )
  }
  const queued = await em.findOne(FiringEntity, { pieceId: piece.id, state: 'queued' })
  const firing =
    queued ??
    em.create(FiringEntity, {
      pieceId: piece.id,
      recipeVersionId: batch.recipeVersionId,
      state: 'queued',
      queuedAt: now(),
    })
  await em.persistAndFlush(firing)
  return { firing, version }
}

async function signOverride(
  em: EntityManager,
  person: PersonActor,
  input: Input,
  outOfDate: OutOfDate,
  subject: { id: string; sha256: string },
): Promise<void> {
  if (outOfDate.faults.length === 0) return
  if (input.override === undefined) refuseOutOfDate(outOfDate.faults)
  await signAs(em, person, {
    password: input.override.password,
    meaning: 'Starts this firing although a check is out of date',
    reason: `${outOfDate.faults.join(' ')} ${input.override.reason}`,
    subject: { type: 'firing', id: subject.id, sha256: subject.sha256 },
  })
}

function addProbes(em: EntityManager, firingId: string, probes: readonly StartProbe[], at: Date): void {
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

async function isFirstOfDay(em: EntityManager, at: Date): Promise<boolean> {
  const { timeZone } = await currentSite(em)
  const earlier = await queryRows(
    em,
    `select 1 from firings where preheat_at < ? and (preheat_at at time zone ?)::date = (?::timestamptz at time zone ?)::date limit 1`,
    [at, timeZone, at, timeZone],
  )
  return earlier.length === 0
}

/** The database holds one live firing a hearth, a piece and a probe; its refusal in words. */
function explainClash(error: unknown): never {
  const constraint = violatedConstraint(error)
  if (constraint === 'one_firing_per_hearth') {
    throw invalidField('hearthId', 'A firing stands on this hearth already. Choose a free one.')
  }
  if (constraint === 'firings_one_live_per_piece') {
    throw invalidField('pieceId', 'This barrel is over a fire already.')
  }
  if (constraint === 'one_firing_per_probe') {
    throw invalidField('probes', 'One of these probes reads another firing. Choose another.')
  }
  throw error
}
