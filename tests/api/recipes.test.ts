import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { closeOrm } from '@/lib/db/orm'
import { recipeSchema, recipeVersionSchema } from '@/lib/recipes/schema'
import { callRoute } from '@/tests/support/api'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { TestPeople } from '@/tests/support/people'
import { createPeople, testPassword } from '@/tests/support/people'
import { sampleContent } from '@/tests/support/recipe-content'

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

type Who = 'chemist' | 'masterCooper' | 'toaster' | 'customer'
const as = (who: Who, method: string, path: string, body?: unknown) =>
  callRoute(method, path, { cookie: people[who].cookie, ...(body === undefined ? {} : { body }) })

let count = 0
async function makeRecipe() {
  count += 1
  const answer = await as('chemist', 'POST', '/api/recipes', {
    name: `Pier ${count}`,
    content: sampleContent(),
  })
  expect(answer.status).toBe(201)
  return recipeSchema.parse(answer.json)
}

describe('the recipe routes', () => {
  it('lead from a new recipe to an approved version, with every optional field left out', async () => {
    const recipe = await makeRecipe()
    const id = recipe.versions[0]?.id ?? ''
    expect(recipe.latestVersion.id).toBe(id)
    expect((await as('chemist', 'POST', `/api/recipe-versions/${id}/send-for-review`)).status).toBe(200)
    const approved = await as('masterCooper', 'POST', `/api/recipe-versions/${id}/approve`, {
      password: testPassword,
    })
    expect(approved.status).toBe(200)
    expect(recipeVersionSchema.parse(approved.json)).toMatchObject({
      state: 'approved',
      approvedBy: 'Mattis Bole',
    })
    const next = await as('chemist', 'POST', `/api/recipes/${recipe.id}/versions`)
    expect(next.status).toBe(201)
    expect(recipeVersionSchema.parse(next.json)).toMatchObject({ number: 2, basedOnVersionId: id })
    const withdrawn = await as('masterCooper', 'POST', `/api/recipe-versions/${id}/withdraw`, {
      reason: 'Came out dark.',
      password: testPassword,
    })
    expect(withdrawn.json).toMatchObject({ state: 'withdrawn', touched: { batches: [], queuedFirings: [] } })
  })

  it('answer a stale save with 409 and both sides', async () => {
    const { latestVersion } = await makeRecipe()
    const path = `/api/recipe-versions/${latestVersion.id}`
    const save = (restMinutes: number) =>
      as('chemist', 'PUT', path, {
        revision: latestVersion.revision,
        content: sampleContent({ restMinutes }),
      })
    expect((await save(11)).status).toBe(200)
    const stale = await save(22)
    expect(stale.status).toBe(409)
    expect(stale.headers.get('content-type')).toContain('application/problem+json')
    expect(stale.json).toMatchObject({ current: { revision: 2, content: { restMinutes: 11 } } })
  })

  it('name each wrong field and what would do', async () => {
    const content = sampleContent({ restMinutes: 999 })
    const [first] = content.stages
    if (first !== undefined) first.minutes = 2
    const answer = await as('chemist', 'POST', '/api/recipes', { name: '', content, colour: 'brown' })
    expect(answer.status).toBe(422)
    expect(answer.json).toMatchObject({
      fields: {
        name: 'Give 1 to 80 letters.',
        'content.restMinutes': 'Give a number from 0 to 240 min.',
        colour: 'This field is not known here. Leave it out.',
      },
    })
    const steep = sampleContent()
    if (steep.stages[0] !== undefined) steep.stages[0].minutes = 2
    const climb = await as('chemist', 'POST', '/api/recipes', { name: 'Steep', content: steep })
    expect(climb.json).toMatchObject({
      fields: { 'content.stages.0.minutes': 'Climbs faster than 12 °C a minute. Give it more time.' },
    })
  })

  it('refuse the same name with a sentence, letter case aside', async () => {
    const recipe = await makeRecipe()
    const answer = await as('chemist', 'POST', '/api/recipes', {
      name: recipe.name.toUpperCase(),
      content: sampleContent(),
    })
    expect(answer.status).toBe(409)
    expect(answer.json).toMatchObject({ fields: { name: expect.stringContaining('already') } })
  })

  it('refuse a customer that is not there', async () => {
    const answer = await as('chemist', 'POST', '/api/recipes', {
      name: 'For nobody',
      customerId: '7d0f7f9e-3f1a-4a34-9a3e-0d6f0f7f9e3f',
      content: sampleContent(),
    })
    expect(answer.status).toBe(422)
    expect(answer.json).toMatchObject({ fields: { customerId: 'Choose a customer from the list.' } })
  })

  it('know no version that is not there, or that is no id', async () => {
    for (const id of ['7d0f7f9e-3f1a-4a34-9a3e-0d6f0f7f9e3f', 'none']) {
      expect((await as('chemist', 'GET', `/api/recipe-versions/${id}`)).status).toBe(404)
      expect((await as('chemist', 'GET', `/api/recipes/${id}`)).status).toBe(404)
    }
  })

  it('let nobody in who may not', async () => {
    const { id, latestVersion } = await makeRecipe()
    expect((await callRoute('GET', '/api/recipes')).status).toBe(401)
    expect((await as('customer', 'GET', '/api/recipes')).status).toBe(403)
    expect((await as('toaster', 'GET', `/api/recipe-versions/${latestVersion.id}`)).status).toBe(404)
    expect((await as('toaster', 'POST', `/api/recipes/${id}/versions`, {})).status).toBe(403)
    const approval = { password: testPassword }
    expect(
      (await as('chemist', 'POST', `/api/recipe-versions/${latestVersion.id}/approve`, approval)).status,
    ).toBe(403)
  })

  it('page the list by cursor, and refuse a cursor that is none of ours', async () => {
    await makeRecipe()
    await makeRecipe()
    const first = await as('chemist', 'GET', '/api/recipes?limit=1&sort=-updated')
    expect(first.json).toMatchObject({ items: [{ name: `Pier ${count}` }], nextCursor: expect.any(String) })
    expect((await as('chemist', 'GET', '/api/recipes?cursor=abc')).status).toBe(422)
    expect((await as('chemist', 'GET', '/api/recipes?state=burnt')).status).toBe(422)
  })

  it('discard a draft once', async () => {
    const { latestVersion } = await makeRecipe()
    expect((await as('chemist', 'DELETE', `/api/recipe-versions/${latestVersion.id}`)).status).toBe(204)
    expect((await as('chemist', 'DELETE', `/api/recipe-versions/${latestVersion.id}`)).status).toBe(404)
  })

  it('take what is not JSON for what it is', async () => {
    const cookie = people.chemist.cookie
    const wrongType = await callRoute('POST', '/api/recipes', {
      cookie,
      body: '<recipe/>',
      headers: { 'content-type': 'text/xml' },
    })
    expect(wrongType.status).toBe(415)
    expect((await callRoute('POST', '/api/recipes', { cookie, body: '{"name":' })).status).toBe(400)
  })
})
