import type { PersonActor } from '@/lib/auth/actor'
import { approveVersion } from '@/lib/recipes/approve-version'
import { createRecipe } from '@/lib/recipes/create-recipe'
import { createVersion } from '@/lib/recipes/create-version'
import type { RecipeContent } from '@/lib/recipes/schema'
import { sendForReview } from '@/lib/recipes/send-for-review'
import { setClock } from '@/lib/runtime'
import type { DemoRecipe } from '@/simulators/scenarios/demo-recipes'
import { demoPassword } from '@/simulators/scenarios/seed-people'

export type SeedVersion = {
  recipeIndex: number
  versionId: string
  content: RecipeContent
  approvedAt: Date | null
}

type Step = { recipeIndex: number; versionIndex: number; at: Date }

const hourMs = 3_600_000

export type RecipeHistory = {
  /** Everything that was written so far. */
  versions: SeedVersion[]
  /** Writes, sends and approves all versions up to an instant, each at its own time. */
  advanceTo: (at: Date) => Promise<void>
}

/** The recipes' versions in the order in which they were written; batches of the past come in between. */
export function recipeHistory(
  recipes: readonly DemoRecipe[],
  people: { chemist: PersonActor; masterCooper: PersonActor },
  customerIds: readonly string[],
  today: Date,
): RecipeHistory {
  const steps = stepsOf(recipes, today)
  const recipeIds = new Map<number, string>()
  const versions: SeedVersion[] = []
  return {
    versions,
    advanceTo: async (until) => {
      for (let step = steps[0]; step !== undefined && step.at <= until; step = steps[0]) {
        steps.shift()
        const recipe = recipes[step.recipeIndex]
        const version = recipe?.versions[step.versionIndex]
        if (recipe === undefined || version === undefined) continue
        const { at } = step
        setClock(() => at.getTime())
        const content = { ...version.content, notes: `${version.reason} ${version.content.notes}` }
        const versionId = await writeVersion(people.chemist, recipe, content, recipeIds, step, customerIds)
        const approvedAt = await settle(versionId, version.fate, at, people)
        versions.push({ recipeIndex: step.recipeIndex, versionId, content, approvedAt })
      }
    },
  }
}

function stepsOf(recipes: readonly DemoRecipe[], today: Date): Step[] {
  return recipes
    .flatMap((recipe, recipeIndex) =>
      recipe.versions.map((version, versionIndex) => ({
        recipeIndex,
        versionIndex,
        at: new Date(today.getTime() - version.daysAgo * 24 * hourMs),
      })),
    )
    .sort((a, b) => a.at.getTime() - b.at.getTime())
}

async function writeVersion(
  chemist: PersonActor,
  recipe: DemoRecipe,
  content: RecipeContent,
  recipeIds: Map<number, string>,
  step: Step,
  customerIds: readonly string[],
): Promise<string> {
  const recipeId = recipeIds.get(step.recipeIndex)
  if (recipeId !== undefined) return (await createVersion(chemist, { recipeId, content })).id
  const customerId = recipe.customer === null ? null : (customerIds[recipe.customer] ?? null)
  const made = await createRecipe(chemist, { name: recipe.name, customerId, content })
  recipeIds.set(step.recipeIndex, made.id)
  const first = made.versions[0]
  if (first === undefined) throw new Error(`${recipe.name} was made without a version.`)
  return first.id
}

async function settle(
  id: string,
  fate: 'approved' | 'draft' | 'in review',
  at: Date,
  people: { chemist: PersonActor; masterCooper: PersonActor },
): Promise<Date | null> {
  if (fate === 'draft') return null
  await sendForReview(people.chemist, { id })
  if (fate === 'in review') return null
  const approvedAt = new Date(at.getTime() + 3 * hourMs)
  setClock(() => approvedAt.getTime())
  await approveVersion(people.masterCooper, {
    id,
    password: demoPassword,
    meaning: 'I have checked this version and approve it for firing.',
  })
  return approvedAt
}
