import type { EntityManager } from '@mikro-orm/postgresql'
import type * as z from 'zod'
import type { Firing } from '@/entities/firing'
import type { Mark } from '@/entities/mark'
import { MarkEntity } from '@/entities/mark'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { violatedConstraint } from '@/lib/db/database-errors'
import { inTransaction } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import { canMove, isLive } from '@/lib/firings/firing-states'
import { lockFiring } from '@/lib/firings/lock-firing'
import { markInstant } from '@/lib/firings/mark-instant'
import { readMarks } from '@/lib/firings/read-firing'
import type { addMarkSchema, MarkDto } from '@/lib/firings/schema'
import type { DoneSwap } from '@/lib/firings/swap-probe'
import { swapProbe } from '@/lib/firings/swap-probe'
import type { FiringChange } from '@/lib/live/notify'
import { notifyFiringChanged } from '@/lib/live/notify'
import { recipeCopySchema } from '@/lib/recipes/schema'
import { now } from '@/lib/runtime'

type Input = z.infer<typeof addMarkSchema> & { firingId: string }

/**
 * Adds a mark. Marks are append-only and carry the client's own id: the same mark again is a success that changes
 * nothing. Only phase marks change the firing's state. A mark with `replacesId` corrects one; 'undone' takes it back.
 */
export async function addMark(actor: Actor, input: Input): Promise<MarkDto> {
  requirePermission(actor, 'firings:run trial')
  const person = requirePerson(actor)
  if (input.authorId !== undefined && input.authorId !== person.accountId) {
    throw new AppError(
      'not signed in',
      'Somebody else made this mark. It waits until they are signed in here.',
    )
  }
  const { mark, isNew } = await inTransaction(async (em) => {
    const firing = await lockFiring(em, input.firingId)
    if (!firing.isTrial) requirePermission(actor, 'firings:run')
    const known = await em.findOne(MarkEntity, { id: input.id })
    if (known === null) await insertMark(em, firing, input, person.accountId)
    else requireSameMark(known, input)
    if (known === null) {
      await writeAuditEntry(
        em,
        actor,
        'firing.marked',
        { type: 'firing', id: firing.id },
        { markId: input.id },
      )
    }
    const marks = await readMarks(em, firing.id)
    return { mark: marks.find((one) => one.id === input.id), isNew: known === null }
  })
  if (mark === undefined)
    throw new AppError('conflict', 'A mark of another firing has this id. Make a new one.')
  if (isNew) notifyFiringChanged(input.firingId, changeOf(input.kind))
  return mark
}

function changeOf(kind: Input['kind']): FiringChange {
  if (kind === 'phase') return 'phase'
  return kind === 'swap' ? 'probe' : 'mark'
}

async function insertMark(em: EntityManager, firing: Firing, input: Input, accountId: string): Promise<void> {
  const isLateKind = input.replacesId !== undefined || input.kind === 'note' || input.kind === 'reason'
  if (!isLive(firing.state) && !(firing.state === 'finished' && isLateKind)) {
    throw new AppError(
      'conflict',
      `This firing is ${firing.state}. Only notes, reasons and corrections are added to it now.`,
    )
  }
  const at = markInstant(input.at, { notBefore: firing.preheatAt })
  const replaced = await findReplaced(em, firing, input)
  requireWhatKindNeeds(firing, input)
  const swap = input.kind === 'swap' ? await swapBy(em, firing, input, at) : null
  em.create(MarkEntity, {
    id: input.id,
    firingId: firing.id,
    kind: input.kind,
    at,
    recordedAt: now(),
    accountId,
    phase: input.kind === 'phase' ? (input.phase ?? null) : null,
    stagePosition: input.stagePosition ?? null,
    call: input.kind === 'call' ? (input.call ?? null) : null,
    words: swap === null || input.words !== '' ? input.words : swap.words,
    swapRole: swap === null ? null : (input.role ?? null),
    fromProbeId: swap?.fromProbeId ?? null,
    toProbeId: swap?.toProbeId ?? null,
    step: input.kind === 'reason' ? (input.step ?? null) : null,
    answer: input.kind === 'advice' ? (input.answer ?? null) : null,
    replacesId: input.replacesId ?? null,
  })
  if (input.kind === 'phase' && input.phase !== undefined) movePhase(firing, input.phase, at, replaced)
  em.assign(firing, { revision: firing.revision + 1 })
  await em.flush()
}

/** Closes the one probe's period and opens the other's; the database holds one firing a probe. */
async function swapBy(em: EntityManager, firing: Firing, input: Input, at: Date): Promise<DoneSwap> {
  const { role, probeId, isAtSamePlace } = input
  if (role === undefined) throw invalidField('role', 'Say which probe is swapped: lead, opposite or coals.')
  if (probeId === undefined) throw invalidField('probeId', 'Choose the probe that takes its place.')
  if (isAtSamePlace === undefined) {
    throw invalidField('isAtSamePlace', 'Say whether it sits in the same place.')
  }
  try {
    return await swapProbe(em, firing, { role, probeId, isAtSamePlace }, at)
  } catch (error) {
    if (violatedConstraint(error) !== 'one_firing_per_probe') throw error
    throw invalidField('probeId', 'This probe read another firing at that time. Choose another.')
  }
}

async function findReplaced(em: EntityManager, firing: Firing, input: Input): Promise<Mark | null> {
  if (input.replacesId === undefined) {
    if (input.kind === 'undone') throw invalidField('replacesId', 'Say which mark is undone.')
    return null
  }
  const replaced = await em.findOne(MarkEntity, { id: input.replacesId, firingId: firing.id })
  if (replaced === null) throw invalidField('replacesId', 'There is no such mark in this firing.')
  if ((await em.findOne(MarkEntity, { replacesId: replaced.id })) !== null) {
    throw new AppError('conflict', 'This mark was corrected already. Correct the newest one.')
  }
  if (replaced.kind === 'swap' || input.kind === 'swap') {
    throw invalidField('kind', 'A swap is not undone or moved: what was read since stands. Swap again.')
  }
  if (replaced.kind === 'move') {
    throw invalidField('kind', 'A move to another hearth is not undone. Move the firing again.')
  }
  if (replaced.kind === 'phase' && !(input.kind === 'phase' && input.phase === replaced.phase)) {
    throw invalidField(
      'kind',
      'A phase cannot be undone; its time can be corrected by a phase mark of the same phase.',
    )
  }
  return replaced
}

function requireWhatKindNeeds(firing: Firing, input: Input): void {
  if (input.kind === 'phase' && input.phase === undefined)
    throw invalidField('phase', 'Say which phase begins.')
  if (input.kind === 'call' && input.call === undefined)
    throw invalidField('call', 'Choose early, right or late.')
  if (input.kind === 'reason') requireReason(input)
  if (input.kind === 'advice' && input.answer === undefined)
    throw invalidField('answer', 'Say whether the advice was taken.')
  if (input.kind === 'advice' && input.words === '')
    throw invalidField('words', 'Keep the advice as it stood.')
  if (input.kind !== 'stage' && input.kind !== 'call' && input.step !== 'stage') return
  if (input.stagePosition === undefined)
    throw invalidField('stagePosition', 'Say which stage; the first is 1.')
  const count = recipeCopySchema.parse(firing.recipeCopy).content.stages.length
  if (input.stagePosition > count) throw invalidField('stagePosition', `The recipe has ${count} stages.`)
  if (firing.toastAt === null) throw invalidField('kind', 'Stages are marked once the toast has started.')
}

function requireReason(input: Input): void {
  if (input.step === undefined) throw invalidField('step', 'Say which step was skipped or short.')
  if (input.words === '') throw invalidField('words', 'Say why in a few words.')
  if (input.step !== 'stage' && input.stagePosition !== undefined)
    throw invalidField('stagePosition', 'Only a stage has a position.')
}

const columnOf = {
  preheating: 'preheatAt',
  bending: 'bendAt',
  toasting: 'toastAt',
  resting: 'restAt',
} as const

function movePhase(firing: Firing, phase: keyof typeof columnOf, at: Date, replaced: Mark | null): void {
  if (replaced === null) {
    if (firing.state === phase) throw new AppError('conflict', `This firing is ${phase} already.`)
    if (!canMove(firing.state, phase)) {
      throw new AppError('conflict', `A firing that is ${firing.state} cannot go to ${phase}.`)
    }
    firing.state = phase
  }
  firing[columnOf[phase]] = at
  const inOrder = [firing.preheatAt, firing.bendAt, firing.toastAt, firing.restAt, firing.endedAt]
  const given = inOrder.filter((instant): instant is Date => instant !== null && instant !== undefined)
  const isInOrder = given.every((instant, index) => index === 0 || instant >= (given[index - 1] ?? instant))
  if (!isInOrder) throw invalidField('at', 'The phases would fall out of order at this time.')
}

function requireSameMark(known: Mark, input: Input): void {
  const isSame =
    known.firingId === input.firingId &&
    known.kind === input.kind &&
    (known.phase ?? undefined) === input.phase &&
    (known.stagePosition ?? undefined) === input.stagePosition
  if (!isSame) throw new AppError('conflict', 'Another mark has this id. Make a new id for a new mark.')
}
