import type { Metadata } from 'next'
import { ApprovedPicture } from '@/components/recipes/approved-picture'
import { NewVersionButton } from '@/components/recipes/new-version-button'
import { VersionTable } from '@/components/recipes/version-table'
import { LinkButton } from '@/components/ui/link-button'
import { PageHead } from '@/components/ui/page-head'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import { orNotFound } from '@/lib/http/or-not-found'
import { getRecipe } from '@/lib/recipes/get-recipe'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Recipe' }

export default async function RecipePage({ params }: { params: Promise<{ id: string }> }) {
  const actor = await requirePageActor()
  const { id } = await params
  const recipe = await orNotFound(getRecipe(actor, { id }), id)
  const { rules, timeZone } = await currentSite()
  const open = recipe.versions.find(({ state }) => state === 'draft' || state === 'in review')
  const shown = recipe.versions.find(({ state }) => state === 'approved') ?? recipe.latestVersion
  const canWrite = isAllowed(actor, 'recipes:write')
  const openLink =
    open === undefined ? null : (
      <LinkButton kind="main" href={`/recipe-versions/${open.id}`}>
        Open version {open.number}, {open.state}
      </LinkButton>
    )
  return (
    <>
      <PageHead
        title={recipe.name}
        aside={recipe.customerName === null ? undefined : `for ${recipe.customerName}`}
        sub={shown.content.flavourIntent}
        actions={openLink ?? (canWrite ? <NewVersionButton recipeId={id} label="New version" /> : undefined)}
      />
      <VersionTable versions={recipe.versions} zone={timeZone} />
      <h2 className="mt-7 mb-2 font-[640]">
        Version {shown.number}, {shown.state}
      </h2>
      <ApprovedPicture version={shown} rules={rules} unit={actor.temperatureUnit} />
    </>
  )
}
