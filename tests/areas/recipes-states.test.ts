import fc from 'fast-check'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import type { AppErrorKind } from '@/lib/errors'
import { isAppError } from '@/lib/errors'
import { approveVersion } from '@/lib/recipes/approve-version'
import { createRecipe } from '@/lib/recipes/create-recipe'
import { createVersion } from '@/lib/recipes/create-version'
import { discardDraft } from '@/lib/recipes/discard-draft'
import { getRecipe } from '@/lib/recipes/get-recipe'
import { returnVersion } from '@/lib/recipes/return-version'
import type { VersionState } from '@/lib/recipes/schema'
import { versionStates } from '@/lib/recipes/schema'
import { sendForReview } from '@/lib/recipes/send-for-review'
import { takeBackVersion } from '@/lib/recipes/take-back-version'
import { updateVersion } from '@/lib/recipes/update-version'
import type { VersionVerb } from '@/lib/recipes/version-states'
import { versionMoves } from '@/lib/recipes/version-states'
import { withdrawVersion } from '@/lib/recipes/withdraw-version'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { TestPeople, TestPerson } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'
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

const verbs = ['draft', 'save', 'send', 'take back', 'return', 'approve', 'withdraw', 'discard'] as const
type Verb = (typeof verbs)[number]
const who = ['chemist', 'masterCooper', 'secondMasterCooper', 'toaster', 'administrator'] as const
type Who = (typeof who)[number]
type Step = { verb: Verb; by: Who; at: number }

/** What the rules say, written again without the code: a version as it should be. */
type Modelled = { id: string; state: VersionState; author: Who; editors: Set<Who>; number: number }

const writers: readonly Who[] = ['chemist', 'masterCooper', 'secondMasterCooper']
const coopers: readonly Who[] = ['masterCooper', 'secondMasterCooper']

/** The refusal that a step must meet, or null when it must succeed. */
function expectedRefusal(versions: readonly Modelled[], target: Modelled, step: Step): AppErrorKind | null {
  const isForCoopers = ['return', 'approve', 'withdraw'].includes(step.verb)
  if (!(isForCoopers ? coopers : writers).includes(step.by)) return 'not allowed'
  const isOpen = (version: Modelled) => version.state === 'draft' || version.state === 'in review'
  switch (step.verb) {
    case 'draft':
      return versions.some(isOpen) ? 'conflict' : null
    case 'save':
    case 'send':
    case 'discard':
      return target.state === 'draft' ? null : 'conflict'
    case 'take back':
      if (target.state !== 'in review') return 'conflict'
      return target.author === step.by ? null : 'not allowed'
    case 'return':
      return target.state === 'in review' ? null : 'conflict'
    case 'approve':
      if (target.state !== 'in review') return 'conflict'
      return target.author === step.by || target.editors.has(step.by) ? 'not allowed' : null
    case 'withdraw':
      return target.state === 'approved' || target.state === 'superseded' ? null : 'conflict'
  }
}

/** Does a step in the model; `newId` names a version that was drafted. */
function applyToModel(versions: Modelled[], target: Modelled, step: Step, newId: string | null): void {
  if (step.verb === 'draft' && newId !== null) {
    const number = Math.max(...versions.map((version) => version.number)) + 1
    versions.push({ id: newId, state: 'draft', author: step.by, editors: new Set(), number })
  }
  if (step.verb === 'save') target.editors.add(step.by)
  if (step.verb === 'send') target.state = 'in review'
  if (step.verb === 'take back' || step.verb === 'return') target.state = 'draft'
  if (step.verb === 'withdraw') target.state = 'withdrawn'
  if (step.verb === 'discard') versions.splice(versions.indexOf(target), 1)
  if (step.verb === 'approve') {
    for (const version of versions) if (version.state === 'approved') version.state = 'superseded'
    target.state = 'approved'
  }
}

async function doStep(recipeId: string, target: Modelled, step: Step): Promise<string | null> {
  const person: TestPerson = people[step.by]
  const { actor, password } = person
  const id = target.id
  switch (step.verb) {
    case 'draft':
      return (await createVersion(actor, { recipeId })).id
    case 'save': {
      const recipe = await getRecipe(people.administrator.actor, { id: recipeId })
      const revision = recipe.versions.find((version) => version.id === id)?.revision ?? 1
      await updateVersion(actor, { id, revision, content: sampleContent() })
      return null
    }
    case 'send':
      await sendForReview(actor, { id })
      return null
    case 'take back':
      await takeBackVersion(actor, { id })
      return null
    case 'return':
      await returnVersion(actor, { id, reason: 'The hold is too long.' })
      return null
    case 'approve':
      await approveVersion(actor, { id, password, meaning: 'I approve this.' })
      return null
    case 'withdraw':
      await withdrawVersion(actor, { id, password, meaning: 'I withdraw this.', reason: 'Too dark.' })
      return null
    case 'discard':
      await discardDraft(actor, { id })
      return null
  }
}

async function refusalOf(
  work: () => Promise<string | null>,
): Promise<{ kind: AppErrorKind | null; newId: string | null }> {
  try {
    return { kind: null, newId: await work() }
  } catch (error) {
    if (isAppError(error)) return { kind: error.kind, newId: null }
    throw error
  }
}

let recipeNumber = 0
async function startRecipe(author: Who): Promise<{ recipeId: string; versions: Modelled[] }> {
  recipeNumber += 1
  const recipe = await createRecipe(people[author].actor, {
    name: `Quay ${recipeNumber}`,
    customerId: null,
    content: sampleContent(),
  })
  const first = {
    id: recipe.latestVersion.id,
    state: 'draft' as const,
    author,
    editors: new Set<Who>(),
    number: 1,
  }
  return { recipeId: recipe.id, versions: [first] }
}

const step: fc.Arbitrary<Step> = fc.record({
  // Discarding a lone draft ends a walk, so it is rarer than what leads on.
  verb: fc.oneof(
    { weight: 20, arbitrary: fc.constantFrom(...verbs.filter((verb) => verb !== 'discard')) },
    { weight: 1, arbitrary: fc.constant('discard' as const) },
  ),
  // Those who may write come up more often, so that the walk gets somewhere.
  by: fc.oneof(
    { weight: 6, arbitrary: fc.constantFrom(...writers) },
    { weight: 1, arbitrary: fc.constantFrom(...who) },
  ),
  at: fc.nat(7),
})

describe('a recipe version moves only as the table says', () => {
  it('agrees with the model on every step of random walks, and refuses every other', async () => {
    const done = new Map<Verb, number>()
    await fc.assert(
      fc.asyncProperty(
        fc.constantFrom(...writers),
        fc.array(step, { minLength: 32, maxLength: 32 }),
        async (author, steps) => {
          const { recipeId, versions } = await startRecipe(author)
          for (const one of steps) {
            // Mostly the newest version, sometimes an old one.
            const target = one.at < 5 ? versions.at(-1) : versions[one.at % versions.length]
            if (target === undefined) break
            const expected = expectedRefusal(versions, target, one)
            const { kind, newId } = await refusalOf(() => doStep(recipeId, target, one))
            expect({ ...one, kind }).toEqual({ ...one, kind: expected })
            if (expected === null) {
              applyToModel(versions, target, one, newId)
              done.set(one.verb, (done.get(one.verb) ?? 0) + 1)
            }
            if (versions.length === 0) break
            const shown = await getRecipe(people.administrator.actor, { id: recipeId })
            expect(shown.versions.map(({ id, state, number }) => ({ id, state, number }))).toEqual(
              [...versions].reverse().map(({ id, state, number }) => ({ id, state, number })),
            )
            expect(versions.filter(({ state }) => state === 'approved').length).toBeLessThanOrEqual(1)
          }
        },
      ),
      { seed: 20_260_201, numRuns: 16 },
    )
    // The walks went everywhere: every verb succeeded several times.
    for (const verb of verbs) expect(done.get(verb) ?? 0, verb).toBeGreaterThanOrEqual(3)
  }, 120_000)

  it('is the same table in the database', async () => {
    const rows = await queryRows<{ from_state: string; to_state: string }>(
      await forkEm(),
      'select from_state, to_state from recipe_version_moves',
    )
    const inDatabase = rows.map((row) => `${row.from_state} → ${row.to_state}`).sort()
    const allVerbs = Object.keys(versionMoves) as VersionVerb[]
    const inCode = new Set(
      allVerbs.flatMap((verb) => versionMoves[verb].from.map((from) => `${from} → ${versionMoves[verb].to}`)),
    )
    expect(inDatabase).toEqual([...inCode].sort())
  })

  it('is refused every other move by the database itself', async () => {
    const { versions } = await startRecipe('chemist')
    const id = versions[0]?.id ?? ''
    const em = await forkEm()
    await expect(
      queryRows(em, `update recipe_versions set state = 'approved' where id = ?`, [id]),
    ).rejects.toThrow()
    for (const state of versionStates.filter((one) => one !== 'draft' && one !== 'in review')) {
      await expect(
        queryRows(
          em,
          `update recipe_versions set state = ?, approved_at = now(), approved_by = ?, withdrawn_at = now(),
             withdraw_reason = 'none' where id = ?`,
          [state, people.masterCooper.accountId, id],
        ),
      ).rejects.toThrow(/cannot go from draft|violates check/)
    }
  })
})
