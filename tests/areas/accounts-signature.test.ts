import { randomUUID } from 'node:crypto'
import { afterAll, afterEach, beforeAll, describe, expect, test } from 'vitest'
import { systemActor } from '@/lib/auth/actor'
import { signAs } from '@/lib/auth/sign'
import { closeOrm, forkEm, inTransaction, queryRows } from '@/lib/db/orm'
import { setClock } from '@/lib/runtime'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { TestPeople } from '@/tests/support/people'
import { createPeople, testPassword } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
})

afterEach(() => setClock(null))

afterAll(async () => {
  await closeOrm()
  await database.drop()
})

const subject = { type: 'recipe version', id: randomUUID(), sha256: 'ab'.repeat(32) }
const meaning = 'I have checked this version and approve it for firing.'

function sign(password: string, actor = people.masterCooper.actor) {
  return inTransaction((em) => signAs(em, actor, { password, meaning, reason: 'Tasted well.', subject }))
}

describe('a signature', () => {
  test('carries name, role, time, meaning and the hash of what was signed', async () => {
    const at = Date.parse('2027-03-01T09:30:00Z')
    setClock(() => at)
    const signature = await sign(testPassword)
    expect(signature).toMatchObject({
      name: 'Mattis Bole',
      role: 'master cooper',
      meaning,
      reason: 'Tasted well.',
      signedAt: '2027-03-01T09:30:00.000Z',
    })
    const rows = await queryRows<object>(await forkEm(), 'select * from signatures where id = ?', [
      signature.id,
    ])
    expect(rows).toMatchObject([{ account_name: 'Mattis Bole', subject_sha256: subject.sha256 }])
  })

  test('needs the password; a wrong one names its field and stores nothing', async () => {
    const count = async () =>
      (await queryRows<{ n: number }>(await forkEm(), 'select count(*)::int as n from signatures'))[0]?.n
    const before = await count()
    await expect(sign('wrong')).rejects.toMatchObject({
      kind: 'invalid',
      fields: { password: expect.any(String) },
    })
    expect(await count()).toBe(before)
  })

  test('after five wrong passwords waits, though each wrong try undid its transaction', async () => {
    const { actor } = people.chemist
    let at = Date.parse('2027-03-02T09:30:00Z')
    setClock(() => at)
    for (let time = 0; time < 5; time += 1) {
      await expect(sign('wrong', actor)).rejects.toMatchObject({ kind: 'invalid' })
    }
    await expect(sign(testPassword, actor)).rejects.toMatchObject({ kind: 'too many', retryAfterS: 30 })
    at += 30_000
    expect((await sign(testPassword, actor)).name).toBe('Cora Lind')
  })

  test('is a person’s, never the system’s', async () => {
    await expect(
      inTransaction((em) => signAs(em, systemActor('seed'), { password: testPassword, meaning, subject })),
    ).rejects.toMatchObject({ kind: 'not allowed' })
  })

  test('goes with the work it signs: what undoes the work undoes it', async () => {
    const id = randomUUID()
    await expect(
      inTransaction(async (em) => {
        await signAs(em, people.masterCooper.actor, {
          password: testPassword,
          meaning,
          subject: { ...subject, id },
        })
        throw new Error('the work failed')
      }),
    ).rejects.toThrow('the work failed')
    const rows = await queryRows(await forkEm(), 'select 1 from signatures where subject_id = ?', [id])
    expect(rows).toEqual([])
  })

  test('cannot be changed or removed by the application', async () => {
    const em = await forkEm()
    await expect(queryRows(em, `update signatures set meaning = 'x'`)).rejects.toThrow(/permission denied/)
    await expect(queryRows(em, 'delete from signatures')).rejects.toThrow(/permission denied/)
  })
})
