import { randomUUID } from 'node:crypto'
import fc from 'fast-check'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { PieceDto } from '@/lib/batches/schema'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { isAppError } from '@/lib/errors'
import { abandonFiring } from '@/lib/firings/abandon-firing'
import { addMark } from '@/lib/firings/add-mark'
import { finishFiring } from '@/lib/firings/finish-firing'
import type { FiringState } from '@/lib/firings/firing-states'
import { canMove, firingMoves } from '@/lib/firings/firing-states'
import { getFiring } from '@/lib/firings/get-firing'
import type { addMarkSchema } from '@/lib/firings/schema'
import { firingStates } from '@/lib/live/events'
import type { SeedHearth } from '@/simulators/scenarios/seed-room'
import type * as z from 'zod'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import {
  approvedVersion,
  batchOf,
  checkedRoom,
  refusalOf,
  shortContent,
  startOn,
} from '@/tests/support/firing-room'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
let hearths: SeedHearth[]
let pieces: PieceDto[]
let used = 0

const walks = 14

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  hearths = await checkedRoom(people, 2)
  pieces = await batchOf(people, await approvedVersion(people, 'States', shortContent()), walks + 10)
})

afterAll(async () => {
  await closeOrm()
  await database.drop()
})

async function start() {
  used += 1
  return startOn(people, pieces[used - 1]?.id ?? '', hearths[0]?.id ?? '')
}

type MarkInput = Omit<z.infer<typeof addMarkSchema>, 'id' | 'at' | 'words'>

async function mark(firingId: string, fields: MarkInput, at = new Date(), id = randomUUID()) {
  return addMark(people.toaster.actor, { firingId, id, at: at.toISOString(), words: '', ...fields })
}

async function abandon(id: string) {
  return abandonFiring(people.toaster.actor, { id, reason: 'the test is over' })
}

describe('a mark', () => {
  it('sent again under its id changes nothing, and another mark under that id is refused', async () => {
    const { id } = await start()
    const markId = randomUUID()
    const at = new Date()
    const first = await mark(id, { kind: 'feed' }, at, markId)
    expect(await mark(id, { kind: 'feed' }, at, markId)).toEqual(first)
    expect((await getFiring(people.toaster.actor, { id })).marks).toHaveLength(1)
    expect((await refusalOf(mark(id, { kind: 'stir' }, at, markId))).kind).toBe('conflict')
    await abandon(id)
  })

  it('undone stays on record out of force, and is undone once', async () => {
    const { id } = await start()
    const feed = await mark(id, { kind: 'feed' })
    const undoing = await mark(id, { kind: 'undone', replacesId: feed.id })
    const { marks } = await getFiring(people.toaster.actor, { id })
    expect(marks.map((one) => [one.kind, one.isInForce])).toEqual([
      ['feed', false],
      ['undone', false],
    ])
    expect((await refusalOf(mark(id, { kind: 'undone', replacesId: feed.id }))).kind).toBe('conflict')
    expect(undoing.replacesId).toBe(feed.id)
    await abandon(id)
  })

  it('that corrects another keeps both, and the newest is in force', async () => {
    const { id } = await start()
    const feed = await mark(id, { kind: 'feed' })
    const stir = await mark(id, { kind: 'stir', replacesId: feed.id })
    const turn = await mark(id, { kind: 'turn', replacesId: stir.id })
    const { marks } = await getFiring(people.toaster.actor, { id })
    expect(marks).toHaveLength(3)
    expect(marks.filter((one) => one.isInForce).map((one) => one.id)).toEqual([turn.id])
    await abandon(id)
  })

  it('of a phase cannot be undone; its time can be corrected, in order with the others', async () => {
    const { id, preheatAt } = await start()
    const bend = await mark(id, { kind: 'phase', phase: 'bending' })
    expect((await refusalOf(mark(id, { kind: 'undone', replacesId: bend.id }))).kind).toBe('invalid')
    const early = new Date(Date.parse(preheatAt ?? '') - 60_000)
    const before = mark(id, { kind: 'phase', phase: 'bending', replacesId: bend.id }, early)
    expect((await refusalOf(before)).fields).toHaveProperty('at')
    await mark(id, { kind: 'phase', phase: 'toasting' })
    const late = new Date(Date.now() + 60_000)
    const after = mark(id, { kind: 'phase', phase: 'bending', replacesId: bend.id }, late)
    expect((await refusalOf(after)).fields).toHaveProperty('at')
    const at = new Date(Date.parse(preheatAt ?? ''))
    await mark(id, { kind: 'phase', phase: 'bending', replacesId: bend.id }, at)
    expect((await getFiring(people.toaster.actor, { id })).bendAt).toBe(at.toISOString())
    await abandon(id)
  })

  it('of a stage needs a toast and a stage that the recipe has', async () => {
    const { id } = await start()
    expect((await refusalOf(mark(id, { kind: 'stage', stagePosition: 1 }))).fields).toHaveProperty('kind')
    await mark(id, { kind: 'phase', phase: 'toasting' })
    expect((await refusalOf(mark(id, { kind: 'stage', stagePosition: 4 }))).fields).toHaveProperty(
      'stagePosition',
    )
    expect((await mark(id, { kind: 'stage', stagePosition: 1 })).isInForce).toBe(true)
    await abandon(id)
  })
})

type Step = 'preheating' | 'bending' | 'toasting' | 'resting' | 'finished' | 'abandoned'

async function take(id: string, step: Step): Promise<unknown> {
  if (step === 'finished') {
    return finishFiring(people.toaster.actor, {
      id,
      colour: null,
      smell: null,
      outsideTempC: null,
      remarks: '',
    })
  }
  return step === 'abandoned' ? abandon(id) : mark(id, { kind: 'phase', phase: step })
}

describe('a firing moves only as the table says', () => {
  it('on every step of random walks, and a refused step changes nothing', async () => {
    const steps: Step[] = ['preheating', 'bending', 'toasting', 'resting', 'finished', 'abandoned']
    await fc.assert(
      fc.asyncProperty(fc.array(fc.constantFrom(...steps), { minLength: 2, maxLength: 7 }), async (walk) => {
        const { id } = await start()
        let state: FiringState = 'preheating'
        for (const step of walk) {
          const before = await getFiring(people.masterCooper.actor, { id })
          const isRepeat = step === 'finished' && state === 'finished'
          const isTaken = await take(id, step).then(
            () => true,
            (error: unknown) => {
              if (isAppError(error) && error.kind === 'conflict') return false
              throw error
            },
          )
          expect([state, step, isTaken]).toEqual([state, step, isRepeat || canMove(state, step)])
          const after = await getFiring(people.masterCooper.actor, { id })
          if (isTaken) state = step
          else expect(after).toEqual(before)
          expect(after.state).toBe(state)
        }
        if (state !== 'finished' && state !== 'abandoned') await abandon(id)
      }),
      { seed: 20_261, numRuns: walks },
    )
  }, 120_000)

  it('is the same table in the database', async () => {
    const rows = await queryRows<{ move: string }>(
      await forkEm(),
      `select from_state || ' → ' || to_state as move from firing_moves order by 1`,
    )
    const inCode = firingStates.flatMap((from) => firingMoves[from].map((to) => `${from} → ${to}`))
    expect(rows.map((row) => row.move).sort()).toEqual(inCode.sort())
  })

  it('is refused every other move, a change of the copy and a deletion by the database itself', async () => {
    const { id } = await start()
    const em = await forkEm()
    const forbidden = firingStates.filter((to) => to !== 'preheating' && !canMove('preheating', to))
    for (const to of forbidden) {
      const sql = `update firings set state = ?, toast_at = now(), rest_at = now(), ended_at = now() where id = ?`
      await expect(queryRows(em, sql, [to, id])).rejects.toThrow(/cannot go from preheating/)
    }
    const copy = `update firings set recipe_copy = '{}'::jsonb where id = ?`
    await expect(queryRows(em, copy, [id])).rejects.toThrow(/never changed/)
    await expect(queryRows(em, 'delete from firings where id = ?', [id])).rejects.toThrow()
    await expect(queryRows(em, 'delete from marks where firing_id = ?', [id])).rejects.toThrow()
    await abandon(id)
  })

  it('the database refuses a second live firing on a hearth, of a piece and of a probe', async () => {
    const { id } = await start()
    const em = await forkEm()
    const second = `insert into firing_placements (firing_id, hearth_id, from_at)
      select f.id, ?, now() from firings f where f.state = 'queued' limit 1`
    await expect(queryRows(em, second, [hearths[0]?.id])).rejects.toThrow(/one_firing_per_hearth/)
    const probe = `insert into firing_probes (firing_id, probe_id, role, height, side, depth_mm, mounting, from_at)
      select f.id, ?, 'lead', 'bilge', 'A', 2, 'wedge', now() from firings f where f.state = 'queued' limit 1`
    await expect(queryRows(em, probe, [hearths[0]?.probeIds.lead])).rejects.toThrow(/one_firing_per_probe/)
    const twin = `insert into firings (piece_id, recipe_version_id, state, queued_at, preheat_at, recipe_copy,
        recipe_sha256, site_settings_version, toaster_id)
      select piece_id, recipe_version_id, state, queued_at, preheat_at, recipe_copy, recipe_sha256,
        site_settings_version, toaster_id from firings where id = ?`
    await expect(queryRows(em, twin, [id])).rejects.toThrow(/one_live_per_piece/)
    await abandon(id)
  })
})

describe('an end', () => {
  it('frees hearth and probes, and an abandoned piece can be fired again with its own firing', async () => {
    const first = await start()
    await abandon(first.id)
    const again = await startOn(people, first.piece.id, hearths[0]?.id ?? '')
    expect(again.id).not.toBe(first.id)
    expect((await getFiring(people.masterCooper.actor, { id: first.id })).endReason).toBe('the test is over')
    await abandon(again.id)
  })

  it('before the toast is no finish: the way out is to abandon with a reason', async () => {
    const { id } = await start()
    const refused = await refusalOf(take(id, 'finished'))
    expect(refused).toMatchObject({ kind: 'conflict', detail: expect.stringContaining('Abandon') })
    await abandon(id)
  })

  it('leaves room for notes and corrections alone', async () => {
    const { id } = await start()
    await mark(id, { kind: 'phase', phase: 'toasting' })
    const feed = await mark(id, { kind: 'feed' })
    await take(id, 'finished')
    expect((await refusalOf(mark(id, { kind: 'stir' }))).kind).toBe('conflict')
    expect((await mark(id, { kind: 'note' })).isInForce).toBe(true)
    expect((await mark(id, { kind: 'undone', replacesId: feed.id })).replacesId).toBe(feed.id)
  })
})
