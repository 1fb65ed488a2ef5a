import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { PersonActor } from '@/lib/auth/actor'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import type { AppError } from '@/lib/errors'
import { isAppError } from '@/lib/errors'
import { createBatch } from '@/lib/batches/create-batch'
import { approveVersion } from '@/lib/recipes/approve-version'
import { contentSha256 } from '@/lib/recipes/content-sha256'
import { createRecipe } from '@/lib/recipes/create-recipe'
import { createVersion } from '@/lib/recipes/create-version'
import { discardDraft } from '@/lib/recipes/discard-draft'
import { getRecipe } from '@/lib/recipes/get-recipe'
import { getVersion } from '@/lib/recipes/get-version'
import { listRecipes } from '@/lib/recipes/list-recipes'
import { recipeListQuerySchema } from '@/lib/recipes/list-query'
import { recipeCopyOf } from '@/lib/recipes/recipe-copy'
import type { RecipeContent, RecipeDto } from '@/lib/recipes/schema'
import { recipeVersionSchema } from '@/lib/recipes/schema'
import { sendForReview } from '@/lib/recipes/send-for-review'
import { updateVersion } from '@/lib/recipes/update-version'
import { withdrawVersion } from '@/lib/recipes/withdraw-version'
import { returnVersion } from '@/lib/recipes/return-version'
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

let count = 0
async function draftRecipe(changes: Partial<RecipeContent> = {}, name?: string): Promise<RecipeDto> {
  count += 1
  return createRecipe(people.chemist.actor, {
    name: name ?? `Recipe ${count}`,
    customerId: null,
    content: sampleContent(changes),
  })
}

async function approve(id: string, by: PersonActor = people.masterCooper.actor, reason?: string) {
  await sendForReview(people.chemist.actor, { id })
  return approveVersion(by, { id, password: testPassword, meaning: 'I approve this.', reason })
}

async function approvedRecipe(changes: Partial<RecipeContent> = {}, name?: string): Promise<RecipeDto> {
  const recipe = await draftRecipe(changes, name)
  await approve(recipe.latestVersion.id)
  return getRecipe(people.chemist.actor, { id: recipe.id })
}

async function refusal(work: Promise<unknown>): Promise<AppError> {
  try {
    await work
  } catch (error) {
    if (isAppError(error)) return error
    throw error
  }
  throw new Error('This should have been refused')
}

describe('what a version says', () => {
  it('comes back from the database exactly as it went in, stages and cues in order', async () => {
    const recipe = await draftRecipe()
    expect(recipe.latestVersion.content).toEqual(sampleContent())
    expect(recipe.latestVersion.contentSha256).toBe(contentSha256(sampleContent()))
    expect(recipeVersionSchema.parse(recipe.latestVersion)).toEqual(recipe.latestVersion)
  })

  it('is copied for a firing with one hash, whatever order its keys came in', async () => {
    const { latestVersion } = await draftRecipe()
    const shuffled = {
      ...latestVersion,
      content: Object.fromEntries(Object.entries(latestVersion.content).reverse()),
    }
    const { copy, sha256 } = recipeCopyOf(latestVersion)
    expect(copy.content).toEqual(latestVersion.content)
    expect(recipeCopyOf(recipeVersionSchema.parse(shuffled)).sha256).toBe(sha256)
    expect(sha256).toMatch(/^[0-9a-f]{64}$/)
  })
})

describe('an approved version is frozen', () => {
  let versionId = ''
  beforeEach(async () => {
    versionId = (await approvedRecipe()).latestVersion.id
  })

  it('refuses to be saved', async () => {
    const error = await refusal(
      updateVersion(people.chemist.actor, { id: versionId, revision: 1, content: sampleContent() }),
    )
    expect(error.kind).toBe('conflict')
    expect(error.detail).toContain('cannot be edited')
  })

  it.each([
    ['its own row', `update recipe_versions set rest_minutes = 99 where id = ?`, /cannot be edited/],
    [
      'its stages',
      `update stages set minutes = 99 where version_id = ?`,
      /stages of a version that is approved/,
    ],
    ['a stage taken out', `delete from stages where version_id = ?`, /stages of a version that is approved/],
    [
      'a cue put in',
      `insert into cues (stage_id, position, action, minute) select id, 9, 'stir', 1 from stages where version_id = ?`,
      /cues of a version that is approved/,
    ],
    [
      'its cues',
      `update cues set words = 'more' where stage_id in (select id from stages where version_id = ?)`,
      /cues of a version that is approved/,
    ],
    [
      'the approval',
      `update recipe_versions set approved_at = now() where id = ?`,
      /approval cannot be rewritten/,
    ],
    ['the way back to draft', `update recipe_versions set state = 'draft' where id = ?`, /cannot go from/],
    ['the version taken out', `delete from recipe_versions where id = ?`, /never deleted/],
  ])('the database itself refuses a change of %s', async (_what, sql, message) => {
    await expect(queryRows(await forkEm(), sql, [versionId])).rejects.toThrow(message)
  })
})

describe('four eyes', () => {
  it('the author cannot approve, even being a master cooper', async () => {
    const recipe = await createRecipe(people.masterCooper.actor, {
      name: 'Own work',
      customerId: null,
      content: sampleContent(),
    })
    const id = recipe.latestVersion.id
    const error = await refusal(approve(id))
    expect(error.kind).toBe('not allowed')
    expect((await approveOnly(id, people.secondMasterCooper.actor)).state).toBe('approved')
  })

  it('neither can somebody who edited it on the way', async () => {
    const { latestVersion } = await draftRecipe()
    const { id, revision } = latestVersion
    await updateVersion(people.masterCooper.actor, {
      id,
      revision,
      content: sampleContent({ restMinutes: 12 }),
    })
    const error = await refusal(approve(id))
    expect(error.kind).toBe('not allowed')
    expect(error.detail).toContain('partly yours')
    expect((await approveOnly(id, people.secondMasterCooper.actor)).state).toBe('approved')
  })

  it('the database refuses an approval by the author', async () => {
    const { latestVersion } = await draftRecipe()
    await sendForReview(people.chemist.actor, { id: latestVersion.id })
    await expect(
      queryRows(
        await forkEm(),
        `update recipe_versions set state = 'approved', approved_at = now(), approved_by = author_id where id = ?`,
        [latestVersion.id],
      ),
    ).rejects.toThrow(/four_eyes/)
  })

  it('a wrong password signs nothing and leaves the version in review', async () => {
    const { latestVersion } = await draftRecipe()
    const id = latestVersion.id
    await sendForReview(people.chemist.actor, { id })
    const error = await refusal(
      approveVersion(people.masterCooper.actor, { id, password: 'not it', meaning: 'I approve this.' }),
    )
    expect(error.fields).toHaveProperty('password')
    const version = await getVersion(people.chemist.actor, { id })
    expect(version.state).toBe('in review')
    expect(version.signatures).toEqual([])
  })

  it('the signature carries name, meaning and the hash of what was read', async () => {
    const recipe = await approvedRecipe()
    const { id, signatures, contentSha256: sha256 } = recipe.latestVersion
    expect(signatures).toMatchObject([
      { name: 'Mattis Bole', role: 'master cooper', meaning: 'I approve this.' },
    ])
    const [row] = await queryRows<{ subject_sha256: string }>(
      await forkEm(),
      'select subject_sha256 from signatures where subject_id = ?',
      [id],
    )
    expect(row?.subject_sha256).toBe(sha256)
  })

  async function approveOnly(id: string, by: PersonActor) {
    return approveVersion(by, { id, password: testPassword, meaning: 'I approve this.' })
  }
})

describe('what keeps a version from review or approval', () => {
  it('a tolerance finer than the site can tell apart is refused with the smallest honest one', async () => {
    const { latestVersion } = await draftRecipe({ doseToleranceLog10: 0.08 })
    const error = await refusal(sendForReview(people.chemist.actor, { id: latestVersion.id }))
    expect(error.kind).toBe('invalid')
    expect(error.fields['content.doseToleranceLog10']).toContain('Ask for 0.09 or more')
  })

  it('the smallest honest tolerance itself is taken', async () => {
    const { latestVersion } = await draftRecipe({ doseToleranceLog10: 0.09 })
    expect((await sendForReview(people.chemist.actor, { id: latestVersion.id })).state).toBe('in review')
  })

  it('a plan without dose is refused', async () => {
    const stages = [{ ...firstStage(), targetTempC: 110 }]
    const { latestVersion } = await draftRecipe({ stages })
    const error = await refusal(sendForReview(people.chemist.actor, { id: latestVersion.id }))
    expect(error.detail).toContain('no dose to hold a firing to')
  })

  it('a wood maximum above 230 °C needs the master cooper’s reason, which the signature keeps', async () => {
    const limits = { woodMaximumC: 236, climbMaximumCPerMin: 12, spreadC: 8 }
    const { latestVersion } = await draftRecipe({ limits })
    const error = await refusal(approve(latestVersion.id))
    expect(error.fields).toHaveProperty('reason')
    const approved = await approveVersion(people.masterCooper.actor, {
      id: latestVersion.id,
      password: testPassword,
      meaning: 'I approve this.',
      reason: 'Char trial with two people at the barrel.',
    })
    expect(approved.signatures[0]?.reason).toBe('Char trial with two people at the barrel.')
  })

  function firstStage() {
    const [stage] = sampleContent().stages
    if (stage === undefined) throw new Error('The sample has no stage')
    return stage
  }
})

describe('two people at one draft', () => {
  it('the later save with the older revision is refused with what the server holds', async () => {
    const { latestVersion } = await draftRecipe()
    const { id, revision } = latestVersion
    const theirs = await updateVersion(people.masterCooper.actor, {
      id,
      revision,
      content: sampleContent({ restMinutes: 15 }),
    })
    const error = await refusal(
      updateVersion(people.chemist.actor, { id, revision, content: sampleContent({ restMinutes: 5 }) }),
    )
    expect(error.kind).toBe('stale')
    expect(error.current).toEqual(theirs)
    const mine = await updateVersion(people.chemist.actor, {
      id,
      revision: theirs.revision,
      content: sampleContent({ restMinutes: 5 }),
    })
    expect(mine.content.restMinutes).toBe(5)
  })

  it('of two saves at the same instant one is stale', async () => {
    const { latestVersion } = await draftRecipe()
    const save = (restMinutes: number) =>
      updateVersion(people.chemist.actor, {
        id: latestVersion.id,
        revision: latestVersion.revision,
        content: sampleContent({ restMinutes }),
      }).then(
        () => 'saved',
        (error: unknown) => (isAppError(error) ? error.kind : 'broken'),
      )
    expect((await Promise.all([save(1), save(2)])).sort()).toEqual(['saved', 'stale'])
  })

  it('an approval of a revision that was not the one read is stale', async () => {
    const { latestVersion } = await draftRecipe()
    const { id, revision } = latestVersion
    await sendForReview(people.chemist.actor, { id })
    const error = await refusal(
      approveVersion(people.masterCooper.actor, {
        id,
        password: testPassword,
        meaning: 'Yes.',
        revision: revision + 1,
      }),
    )
    expect(error.kind).toBe('stale')
  })

  it('two new versions at once leave one', async () => {
    const recipe = await approvedRecipe()
    const start = () =>
      createVersion(people.chemist.actor, { recipeId: recipe.id }).then(
        (version) => version.number,
        (error: unknown) => (isAppError(error) ? error.kind : 'broken'),
      )
    expect((await Promise.all([start(), start()])).map(String).sort()).toEqual(['2', 'conflict'])
  })
})

describe('versions through time', () => {
  it('a new version starts from the approved one and supersedes it when approved', async () => {
    const recipe = await approvedRecipe({ restMinutes: 14 })
    const draft = await createVersion(people.chemist.actor, { recipeId: recipe.id })
    expect(draft).toMatchObject({ number: 2, state: 'draft', basedOnVersionId: recipe.latestVersion.id })
    expect(draft.content.restMinutes).toBe(14)
    await approve(draft.id)
    const { versions } = await getRecipe(people.chemist.actor, { id: recipe.id })
    expect(versions.map(({ number, state }) => [number, state])).toEqual([
      [2, 'approved'],
      [1, 'superseded'],
    ])
    expect(versions[1]?.supersededAt).not.toBeNull()
  })

  it('a second open version is refused, and the answer names the first', async () => {
    const recipe = await draftRecipe()
    const error = await refusal(createVersion(people.masterCooper.actor, { recipeId: recipe.id }))
    expect(error.kind).toBe('conflict')
    expect(error.detail).toContain('Version 1 by Cora Lind is still a draft')
  })

  it('discarding the only draft takes the recipe with it; a later draft leaves the rest', async () => {
    const lone = await draftRecipe()
    await discardDraft(people.chemist.actor, { id: lone.latestVersion.id })
    expect((await refusal(getRecipe(people.chemist.actor, { id: lone.id }))).kind).toBe('not found')
    const recipe = await approvedRecipe()
    const draft = await createVersion(people.chemist.actor, { recipeId: recipe.id })
    await discardDraft(people.chemist.actor, { id: draft.id })
    expect((await getRecipe(people.chemist.actor, { id: recipe.id })).versions).toHaveLength(1)
  })

  it('a return keeps its reason, who and when, and the draft can be edited again', async () => {
    const { latestVersion } = await draftRecipe()
    const { id, revision } = latestVersion
    await sendForReview(people.chemist.actor, { id })
    const returned = await returnVersion(people.masterCooper.actor, { id, reason: 'The hold is too long.' })
    expect(returned).toMatchObject({
      state: 'draft',
      returnReason: 'The hold is too long.',
      returnedBy: 'Mattis Bole',
    })
    const saved = await updateVersion(people.chemist.actor, { id, revision, content: sampleContent() })
    expect(saved.revision).toBe(revision + 1)
  })

  it('withdrawing names the batches and barrels that wait for the version', async () => {
    const recipe = await approvedRecipe()
    const batch = await createBatch(people.masterCooper.actor, {
      customerId: people.customers.first.id,
      recipeVersionId: recipe.latestVersion.id,
      pieceCount: 3,
      woodLot: 'Lot 7',
      dueWeek: null,
      notes: '',
    })
    const withdrawn = await withdrawVersion(people.masterCooper.actor, {
      id: recipe.latestVersion.id,
      reason: 'Came out smoky.',
      password: testPassword,
      meaning: 'I withdraw this.',
    })
    expect(withdrawn.state).toBe('withdrawn')
    expect(withdrawn.touched.batches).toEqual([{ id: batch.id, number: batch.number, unfiredCount: 3 }])
    expect(withdrawn.touched.queuedFirings).toHaveLength(3)
  })

  it('every act is in the audit trail', async () => {
    const recipe = await approvedRecipe()
    const rows = await queryRows<{ action: string }>(
      await forkEm(),
      `select action from audit_entries where subject_id in (?, ?) order by seq`,
      [recipe.id, recipe.latestVersion.id],
    )
    expect(rows.map((row) => row.action)).toEqual([
      'recipe created',
      'recipe version sent for review',
      'recipe version approved',
    ])
  })
})

describe('who sees what', () => {
  it('a toaster sees recipes with an approved version, and of those approved and superseded versions only', async () => {
    const recipe = await approvedRecipe({}, 'Seen by toasters')
    const first = recipe.latestVersion
    const draft = await createVersion(people.chemist.actor, { recipeId: recipe.id })
    const hidden = await draftRecipe({}, 'Not seen by toasters')
    const toaster = people.toaster.actor
    const shown = await getRecipe(toaster, { id: recipe.id })
    expect(shown.versions.map(({ id }) => id)).toEqual([first.id])
    expect(shown.latestVersion.id).toBe(first.id)
    expect(shown.versionCount).toBe(1)
    expect((await refusal(getVersion(toaster, { id: draft.id }))).kind).toBe('not found')
    expect((await refusal(getRecipe(toaster, { id: hidden.id }))).kind).toBe('not found')
    const list = await listRecipes(toaster, recipeListQuerySchema.parse({ q: 'seen by toasters' }))
    expect(list.items.map(({ name }) => name)).toEqual(['Seen by toasters'])
    const drafts = await listRecipes(toaster, recipeListQuerySchema.parse({ q: 'seen by', state: 'draft' }))
    expect(drafts.items).toEqual([])
  })

  it('a customer sees nothing of recipes', async () => {
    const recipe = await approvedRecipe()
    const customer = people.customer.actor
    expect((await refusal(listRecipes(customer, recipeListQuerySchema.parse({})))).kind).toBe('not allowed')
    expect((await refusal(getRecipe(customer, { id: recipe.id }))).kind).toBe('not allowed')
    expect((await refusal(getVersion(customer, { id: recipe.latestVersion.id }))).kind).toBe('not allowed')
  })
})

describe('the list of recipes', () => {
  const list = (query: Record<string, unknown>) =>
    listRecipes(people.chemist.actor, recipeListQuerySchema.parse(query))

  it('finds by name, customer and flavour intent, letter case aside, and takes % and _ as letters', async () => {
    await createRecipe(people.chemist.actor, {
      name: 'Harbour 100% slow_one',
      customerId: people.customers.second.id,
      content: sampleContent({ flavourIntent: 'Clove and cedarwood' }),
    })
    for (const q of ['harbour', 'FERRY LANE', 'cedarwood', '100%', 'slow_']) {
      expect((await list({ q })).items.map(({ name }) => name)).toContain('Harbour 100% slow_one')
    }
    expect((await list({ q: 'slow%one' })).items).toEqual([])
  })

  it('walks through pages without a hole or a double, either way and by either key', async () => {
    for (let n = 0; n < 7; n += 1) await draftRecipe({}, `Paged ${n % 2 ? 'é' : 'E'} ${n}`)
    for (const sort of ['name', '-name', 'updated', '-updated']) {
      const whole = (await list({ q: 'paged', sort, limit: 50 })).items.map(({ id }) => id)
      const walked: string[] = []
      let cursor: string | undefined
      do {
        const page = await list({ q: 'paged', sort, limit: 2, cursor })
        walked.push(...page.items.map(({ id }) => id))
        cursor = page.nextCursor ?? undefined
      } while (cursor !== undefined)
      expect(walked).toEqual(whole)
      expect(whole).toHaveLength(7)
    }
  })

  it('filters by state, piece and customer', async () => {
    const head = await draftRecipe({ pieceKind: 'head', sizeAndShape: 'Head, 560 mm' }, 'A head of its own')
    const heads = await list({ pieceKind: 'head' })
    expect(heads.items.map(({ id }) => id)).toEqual([head.id])
    const approved = await list({ state: 'approved', limit: 200 })
    expect(approved.items.length).toBeGreaterThan(0)
    expect(approved.items.every((item) => item.approvedVersion !== null)).toBe(true)
    const ofCustomer = await list({ customerId: people.customers.second.id })
    expect(ofCustomer.items.every((item) => item.customerName === 'Ferry Lane Cellars')).toBe(true)
  })
})
