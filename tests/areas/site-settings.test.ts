import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { closeOrm, forkEm } from '@/lib/db/orm'
import { currentSite, siteOfVersion } from '@/lib/site/current-site'
import { createSite, unnamedSite } from '@/lib/site/create-site'
import { systemActor } from '@/lib/auth/actor'
import type { SiteSettingsDto } from '@/lib/site/schema'
import { callRoute } from '@/tests/support/api'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
})

afterAll(async () => {
  await closeOrm()
  await database.drop()
})

async function read(): Promise<SiteSettingsDto> {
  const answer = await callRoute('GET', '/api/site-settings', { cookie: people.administrator.cookie })
  return answer.json as SiteSettingsDto
}

async function put(change: object) {
  const { version, name, serialPrefix, timeZone, rules, room } = await read()
  return callRoute('PUT', '/api/site-settings', {
    cookie: people.administrator.cookie,
    body: { version, name, serialPrefix, timeZone, rules, room, ...change },
  })
}

describe('the site’s settings', () => {
  test('change by a new version; the old one stays readable and the new one is in force at once', async () => {
    const before = await read()
    const rules = { ...before.rules, dose: { ...before.rules.dose, zC: 33.5 } }
    const changed = await put({ name: 'Test Yard and Sons', rules })
    expect(changed.json).toMatchObject({ version: before.version + 1, changedBy: 'Ada Quill' })
    const em = await forkEm()
    expect((await currentSite(em)).rules.dose.zC).toBe(33.5)
    expect((await siteOfVersion(em, before.version)).rules.dose.zC).toBe(34)
    const trail = await callRoute('GET', '/api/audit-entries?action=site.changed', {
      cookie: people.masterCooper.cookie,
    })
    expect(trail.json).toMatchObject({
      items: [{ detail: { changes: { 'rules.dose.zC': { from: 34, to: 33.5 } } } }],
    })
  })

  test('that do not differ make no version', async () => {
    const { version } = await read()
    expect((await put({})).json).toMatchObject({ version })
  })

  test('of a stale edit are refused with both sides', async () => {
    const answer = await put({ version: 1, name: 'Overwritten' })
    expect(answer.status).toBe(409)
    expect(answer.json).toMatchObject({ current: { name: 'Test Yard and Sons' } })
  })

  test('of two edits at once one gets in', async () => {
    const answers = await Promise.all([put({ name: 'One' }), put({ name: 'Two' }), put({ name: 'Three' })])
    expect(answers.map((answer) => answer.status).sort()).toEqual([200, 409, 409])
  })

  test('out of bounds name the field by its path', async () => {
    const { rules } = await read()
    const answer = await put({ timeZone: 'Mars/Base', rules: { ...rules, dose: { ...rules.dose, zC: 500 } } })
    expect(answer.status).toBe(422)
    expect(answer.json).toMatchObject({
      fields: { timeZone: expect.stringContaining('Europe/Paris'), 'rules.dose.zC': expect.any(String) },
    })
  })

  test('are first written by set-up, once', async () => {
    await expect(createSite(systemActor('set-up'), unnamedSite)).rejects.toMatchObject({ kind: 'conflict' })
  })
})
