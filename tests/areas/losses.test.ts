import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { addLoss } from '@/lib/barrels/add-loss'
import { listLosses } from '@/lib/barrels/list-losses'
import { removeLoss } from '@/lib/barrels/remove-loss'
import { addLossSchema } from '@/lib/barrels/schema'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { callRoute } from '@/tests/support/api'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { refusalOf } from '@/tests/support/firing-room'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'
import type { TestFiring, TestFiringOptions } from '@/tests/support/room'
import { createTestFiring, createTestGateway, createTestProbe } from '@/tests/support/room'

let database: TestDatabase
let people: TestPeople
let firing: TestFiring

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  firing = await newFiring()
})

afterAll(async () => {
  await closeOrm()
  await database.drop()
})

let channel = 0
async function newFiring(state: TestFiringOptions['state'] = 'toasting'): Promise<TestFiring> {
  const gateway = await createTestGateway()
  const lead = await createTestProbe(gateway.gatewayId, (channel += 1))
  return createTestFiring({
    accountId: people.toaster.accountId,
    customerId: people.customers.first.id,
    state,
    preheatAt: new Date(Date.now() - 3_600_000),
    ...(state === 'preheating' ? {} : { toastAt: new Date(Date.now() - 2_400_000) }),
    probes: { lead: lead.id },
  })
}

type Loss = Parameters<typeof addLoss>[1]
const lossOf = (changes: Partial<Loss> & Pick<Loss, 'kind'>): Loss => ({
  ...addLossSchema.parse({
    id: randomUUID(),
    kind: 'leak',
    stavePosition: 4,
  }),
  pieceId: firing.pieceId,
  firingId: firing.id,
  ...changes,
})
const blister = { kind: 'blister', blisterPlace: 'bilge', blisterSizeMm: 22 } as const
const note = (changes: Partial<Loss> & Pick<Loss, 'kind'>) => addLoss(people.toaster.actor, lossOf(changes))

describe('a loss', () => {
  test('keeps stave position and lot: the batch’s where none is said', async () => {
    const loss = await note({ ...blister, stavePosition: 12, words: 'Near the joint' })
    expect(loss).toMatchObject({
      ...blister,
      stavePosition: 12,
      woodLot: 'L1',
      firingId: firing.id,
      words: 'Near the joint',
      by: 'Tobin Ash',
      ended: null,
    })
    expect(await note({ kind: 'leak', stavePosition: null, woodLot: 'L7', firingId: null })).toMatchObject({
      woodLot: 'L7',
      firingId: null,
    })
  })

  test('a stave put in after the toast carries its own toast, or is untoasted; one put in before shares it', async () => {
    const late = { kind: 'stave replaced', replacedWhen: 'after the toast', replacementLot: 'L2' } as const
    expect(await note({ ...late, replacementToast: 'untoasted' })).toMatchObject({
      replacementToast: 'untoasted',
    })
    const early = { ...late, replacedWhen: 'before the toast' } as const
    expect(await note(early)).toMatchObject({ replacementToast: null })
    const answer = await callRoute('POST', `/api/barrels/${firing.pieceId}/losses`, {
      cookie: people.toaster.cookie,
      body: { id: randomUUID(), firingId: firing.id, stavePosition: 4, ...late },
    })
    expect(answer.status).toBe(422)
    expect(answer.json).toMatchObject({
      fields: { replacementToast: 'Say its own toast, or that it is untoasted.' },
    })
  })

  test.each([
    [{ kind: 'blister', blisterPlace: 'bilge' }, 'blisterSizeMm'],
    [{ kind: 'blister', blisterSizeMm: 5 }, 'blisterPlace'],
    [{ kind: 'broken at the pull', stavePosition: null }, 'stavePosition'],
    [{ kind: 'broken at the pull', firingId: null }, 'firingId'],
    [{ kind: 'stave replaced' }, 'replacedWhen'],
    [{ kind: 'leak', blisterSizeMm: 4 }, 'blisterSizeMm'],
    [{ kind: 'leak', replacementToast: 'medium' }, 'replacementToast'],
    [{ kind: 'leak', stavePosition: 61 }, 'stavePosition'],
  ])('%o names what it lacks or has too much of: %s', async (changes, field) => {
    const answer = await callRoute('POST', `/api/barrels/${firing.pieceId}/losses`, {
      cookie: people.toaster.cookie,
      body: { id: randomUUID(), firingId: firing.id, stavePosition: 4, ...changes },
    })
    expect(answer.status).toBe(422)
    expect(answer.json).toMatchObject({ fields: { [field]: expect.any(String) } })
  })

  test('at the pull is of a firing whose bend has begun', async () => {
    const early = await newFiring('preheating')
    const pull = { kind: 'broken at the pull', pieceId: early.pieceId, firingId: early.id } as const
    expect(await refusalOf(note(pull))).toMatchObject({ fields: { kind: expect.stringContaining('bend') } })
    expect(await note({ kind: 'broken at the pull' })).toMatchObject({ kind: 'broken at the pull' })
  })

  test('of another piece’s firing is refused', async () => {
    const other = await newFiring()
    expect(await refusalOf(note({ kind: 'leak', firingId: other.id }))).toMatchObject({
      fields: { firingId: 'This firing is of another piece.' },
    })
  })
})

describe('what was said stays said', () => {
  test('the same id again changes nothing', async () => {
    const loss = lossOf({ kind: 'leak' })
    const first = await addLoss(people.toaster.actor, loss)
    expect(await addLoss(people.toaster.actor, { ...loss, words: 'other words' })).toEqual(first)
    expect(
      await refusalOf(addLoss(people.toaster.actor, { ...loss, ...blister, kind: 'blister' })),
    ).toMatchObject({ kind: 'conflict' })
  })

  test('put right, both are kept, the first with what stands in its place; once', async () => {
    const first = await note({ ...blister, stavePosition: 3 })
    const second = await note({ ...blister, stavePosition: 5, replacesId: first.id })
    const { items } = await listLosses(people.toaster.actor, { id: firing.pieceId })
    expect(items.find((loss) => loss.id === first.id)?.ended).toMatchObject({
      by: 'Tobin Ash',
      replacedById: second.id,
      reason: null,
    })
    expect(await refusalOf(note({ ...blister, replacesId: first.id }))).toMatchObject({ kind: 'conflict' })
  })

  test('taken back with a reason it is kept too, and is taken back once', async () => {
    const loss = await note({ kind: 'leak' })
    const taken = await removeLoss(people.masterCooper.actor, {
      id: randomUUID(),
      lossId: loss.id,
      reason: 'It was sweat, not a leak',
    })
    expect(taken.ended).toMatchObject({ by: 'Mattis Bole', reason: 'It was sweat, not a leak' })
    expect(
      await refusalOf(
        removeLoss(people.toaster.actor, { id: randomUUID(), lossId: loss.id, reason: 'again' }),
      ),
    ).toMatchObject({ kind: 'conflict' })
    const trail = await callRoute('GET', '/api/audit-entries?action=loss.taken%20back', {
      cookie: people.masterCooper.cookie,
    })
    expect(trail.json).toMatchObject({ items: [{ detail: { lossId: loss.id } }] })
  })

  test('of two who take one back at once one gets in', async () => {
    const loss = await note({ kind: 'leak' })
    const outcomes = await Promise.allSettled(
      [1, 2, 3].map(() =>
        removeLoss(people.toaster.actor, { id: randomUUID(), lossId: loss.id, reason: 'Not one' }),
      ),
    )
    expect(outcomes.map((one) => one.status).sort()).toEqual(['fulfilled', 'rejected', 'rejected'])
  })

  test('the database changes no row, and holds what each kind needs', async () => {
    const loss = await note({ kind: 'leak' })
    const em = await forkEm()
    await expect(queryRows(em, `update losses set words = 'x' where id = ?`, [loss.id])).rejects.toThrow(
      /permission denied/,
    )
    const insert = (columns: string, values: string) =>
      queryRows(
        em,
        `insert into losses (id, piece_id, firing_id, at, recorded_at, account_id, ${columns})
         values (gen_random_uuid(), ?, ?, now(), now(), ?, ${values})`,
        [firing.pieceId, firing.id, people.toaster.accountId],
      )
    const faulty = [
      ['kind, stave_position', `'leak', 1`, 'losses_lot_given'],
      ['kind, wood_lot', `'broken at the pull', 'L1'`, 'losses_place_given'],
      ['kind, wood_lot, stave_position', `'blister', 'L1', 2`, 'losses_blister_given'],
      [
        'kind, wood_lot, stave_position, replaced_when, replacement_lot',
        `'stave replaced', 'L1', 2, 'after the toast', 'L2'`,
        'losses_own_toast_given',
      ],
      ['kind, words', `'taken back', 'no reason'`, 'losses_taken_back_with_reason'],
    ] as const
    for (const [columns, values, constraint] of faulty) {
      await expect(insert(columns, values), constraint).rejects.toThrow(constraint)
    }
  })
})

describe('who may', () => {
  test('toaster and master cooper note losses; a chemist those of a trial alone', async () => {
    expect(await refusalOf(addLoss(people.chemist.actor, lossOf({ kind: 'leak' })))).toMatchObject({
      kind: 'not allowed',
    })
    const trial = await newFiring()
    await queryRows(await forkEm(), 'update firings set is_trial = true where id = ?', [trial.id])
    const own = { kind: 'leak', pieceId: trial.pieceId, firingId: trial.id } as const
    expect(await addLoss(people.chemist.actor, lossOf(own))).toMatchObject({ by: 'Cora Lind' })
  })

  test('no customer reads them, their own barrel’s neither', async () => {
    const answer = await callRoute('GET', `/api/barrels/${firing.pieceId}/losses`, {
      cookie: people.customer.cookie,
    })
    expect(answer.status).toBe(403)
  })
})
