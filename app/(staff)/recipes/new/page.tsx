import type { Metadata } from 'next'
import { redirect } from 'next/navigation'
import { NewRecipeForm } from '@/components/recipes/new-recipe-form'
import { PageHead } from '@/components/ui/page-head'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import { recipeChoices } from '@/lib/recipes/recipe-choices'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'New recipe' }

export default async function NewRecipePage() {
  const actor = await requirePageActor()
  if (!isAllowed(actor, 'recipes:write')) redirect('/recipes')
  const [{ customers }, { rules }] = await Promise.all([recipeChoices(actor), currentSite()])
  const { doseToleranceLog10, bendMin } = rules
  return (
    <>
      <PageHead
        title="New recipe"
        sub="Its first version is a draft: nothing is fired with it before a master cooper has approved it."
      />
      <NewRecipeForm customers={customers} rules={{ doseToleranceLog10, bendMin }} />
    </>
  )
}
