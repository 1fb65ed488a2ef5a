import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { createBatch } from '@/lib/batches/create-batch'
import { getBatch } from '@/lib/batches/get-batch'
import { getPiece } from '@/lib/batches/get-piece'
import { listBatches } from '@/lib/batches/list-batches'
import { listPieces } from '@/lib/batches/list-pieces'
import { createBatchSchema } from '@/lib/batches/schema'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { createRecipe } from '@/lib/recipes/create-recipe'
import { isValid37_36 } from '@/lib/science/identifier'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { approvedVersion, batchOf, refusalOf, shortContent } from '@/tests/support/firing-room'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
let versionId: string

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  versionId = await approvedVersion(people, 'Batches', shortContent())
})

afterAll(async () => {
  await closeOrm()
  await database.drop()
})

const whole = () => ({
  customerId: people.customers.first.id,
  recipeVersionId: versionId,
  pieceCount: 2,
  woodLot: 'Lot 9',
  dueWeek: '2027-W05',
  notes: 'for the tests',
})

describe('a new batch', () => {
  it('gives every piece a serial with a valid check character, a place, and a queued firing', async () => {
    const pieces = await batchOf(people, versionId, 12)
    expect(pieces.map((piece) => piece.position)).toEqual(Array.from({ length: 12 }, (_, i) => i + 1))
    for (const piece of pieces) {
      expect(isValid37_36(piece.serial.replaceAll('-', ''))).toBe(true)
      expect(piece.firing).toMatchObject({ state: 'queued' })
    }
    expect(new Set(pieces.map((piece) => piece.serial)).size).toBe(12)
  })

  it('keeps what was said of it, counts its pieces and leaves an audit entry', async () => {
    const batch = await createBatch(people.masterCooper.actor, whole())
    const { customerId, ...said } = whole()
    expect(batch).toMatchObject({ ...said, customer: { id: customerId }, waitingCount: 2, liveCount: 0 })
    const entries = await queryRows<{ action: string }>(
      await forkEm(),
      'select action from audit_entries where subject_id = ?',
      [batch.id],
    )
    expect(entries).toEqual([{ action: 'batch.created' }])
  })

  it('made by two people at once shares no number and no serial', async () => {
    const [first, second] = await Promise.all([
      createBatch(people.masterCooper.actor, { ...whole(), pieceCount: 20 }),
      createBatch(people.secondMasterCooper.actor, { ...whole(), pieceCount: 20 }),
    ])
    expect(first.number).not.toBe(second.number)
    const serials = await queryRows<{ serial: string }>(
      await forkEm(),
      'select distinct serial from pieces where batch_id in (?, ?)',
      [first.id, second.id],
    )
    expect(serials).toHaveLength(40)
  })

  it('takes approved versions and known customers only, and leaves nothing behind when refused', async () => {
    const { actor } = people.masterCooper
    const count = async () => (await queryRows(await forkEm(), 'select 1 from pieces')).length
    const before = await count()
    const draft = await createRecipe(people.chemist.actor, {
      name: 'Draft only',
      customerId: null,
      content: shortContent(),
    })
    const unapproved = createBatch(actor, { ...whole(), recipeVersionId: draft.latestVersion.id })
    expect((await refusalOf(unapproved)).fields).toHaveProperty('recipeVersionId')
    const unknown = createBatch(actor, { ...whole(), customerId: versionId })
    expect((await refusalOf(unknown)).fields).toHaveProperty('customerId')
    expect(await count()).toBe(before)
  })

  it('is the master cooper’s to make', async () => {
    for (const person of [people.toaster, people.chemist, people.administrator, people.customer]) {
      expect((await refusalOf(createBatch(person.actor, whole()))).kind).toBe('not allowed')
    }
  })

  it('names each field that is out of bounds with its sentence', () => {
    const parsed = createBatchSchema.safeParse({
      ...whole(),
      pieceCount: 0,
      woodLot: ' ',
      dueWeek: '2027-W54',
    })
    const issues = parsed.success ? [] : parsed.error.issues.map((issue) => [issue.path[0], issue.message])
    expect(issues).toEqual([
      ['pieceCount', 'At least 1.'],
      ['woodLot', 'Name the wood lot.'],
      ['dueWeek', 'Write the week as 2027-W05.'],
    ])
  })
})

describe('a customer', () => {
  it('finds their own batches and pieces, and another’s not at all', async () => {
    const [mine] = await batchOf(people, versionId, 1)
    const [theirs] = await batchOf(people, versionId, 1, people.customers.second.id)
    const { actor } = people.customer
    expect((await getBatch(actor, { id: mine?.batch.id ?? '' })).id).toBe(mine?.batch.id)
    expect((await refusalOf(getBatch(actor, { id: theirs?.batch.id ?? '' }))).kind).toBe('not found')
    expect((await refusalOf(getPiece(actor, { id: theirs?.id ?? '' }))).kind).toBe('not found')
    const batches = await listBatches(actor, { limit: 200 })
    const pieces = await listPieces(actor, { show: 'all', limit: 200 })
    expect(new Set(batches.items.map((one) => one.customer.id))).toEqual(new Set([people.customers.first.id]))
    expect(new Set(pieces.items.map((one) => one.customer.id))).toEqual(new Set([people.customers.first.id]))
    const asked = await listBatches(actor, { customerId: people.customers.second.id, limit: 200 })
    expect(asked.items).toEqual([])
  })
})

describe('the lists', () => {
  it('walk through pages without a hole or a double, the queue in its order', async () => {
    const { actor } = people.toaster
    const all = await listPieces(actor, { show: 'waiting', limit: 200 })
    const walked: string[] = []
    let cursor: string | undefined
    do {
      const page = await listPieces(actor, { show: 'waiting', limit: 7, cursor })
      walked.push(...page.items.map((piece) => piece.serial))
      cursor = page.nextCursor ?? undefined
    } while (cursor !== undefined)
    expect(walked).toEqual(all.items.map((piece) => piece.serial))
    expect(walked.length).toBeGreaterThan(20)
  })

  it('find by serial, lot and customer, and take % as a letter', async () => {
    const { actor } = people.toaster
    const [piece] = (await listPieces(actor, { show: 'all', limit: 1 })).items
    const bySerial = await listPieces(actor, { show: 'all', limit: 50, q: piece?.serial.toLowerCase() })
    expect(bySerial.items.map((one) => one.serial)).toEqual([piece?.serial])
    expect((await listPieces(actor, { show: 'all', limit: 50, q: '%' })).items).toEqual([])
    expect((await listBatches(actor, { limit: 50, q: 'ferry lane' })).items.length).toBeGreaterThan(0)
  })
})
