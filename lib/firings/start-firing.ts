import type { EntityManager } from '@mikro-orm/postgresql'
import type * as z from 'zod'
import type { Firing } from '@/entities/firing'
import { FiringEntity } from '@/entities/firing'
import { FiringPlacementEntity } from '@/entities/firing-placement'
import { HearthEntity } from '@/entities/hearth'
import { PieceEntity } from '@/entities/piece'
import { BatchEntity } from '@/entities/batch'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor, PersonActor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import type { StartProbe } from '@/lib/firings/check-start'
import { findOutOfDate, findStartProbes, requireSamePlace } from '@/lib/firings/check-start'
import { explainClash } from '@/lib/firings/explain-clash'
import { addFiringProbes } from '@/lib/firings/add-firing-probes'
import { isFirstOfDay } from '@/lib/firings/first-of-day'
import { markInstant } from '@/lib/firings/mark-instant'
import { readFiring } from '@/lib/firings/read-firing'
import type { FiringDto, startFiringSchema } from '@/lib/firings/schema'
import { signOverride } from '@/lib/firings/sign-override'
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
    await signOverride(em, person, input.override, outOfDate.faults, { id: firing.id, sha256 })
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
    addFiringProbes(em, firing.id, probes, at)
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
