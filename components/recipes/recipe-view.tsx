import { LinkButton } from '@/components/ui/link-button'
import { PageHead } from '@/components/ui/page-head'
import type { TemperatureUnit } from '@/lib/format'
import type { RecipeDto } from '@/lib/recipes/schema'
import type { SiteRules } from '@/lib/science/site-rules'
import { ApprovedPicture } from './approved-picture'
import { NewVersionButton } from './new-version-button'
import { VersionTable } from './version-table'

/** A recipe through time, and the plan that is fired now, large; the latest where none is approved. */
export function RecipeView({
  recipe,
  rules,
  unit,
  zone,
  canWrite,
}: {
  recipe: RecipeDto
  rules: SiteRules
  unit: TemperatureUnit
  zone: string
  canWrite: boolean
}) {
  const open = recipe.versions.find(({ state }) => state === 'draft' || state === 'in review')
  const shown = recipe.versions.find(({ state }) => state === 'approved') ?? recipe.latestVersion
  const start = canWrite ? <NewVersionButton recipeId={recipe.id} label="New version" /> : undefined
  return (
    <>
      <PageHead
        title={recipe.name}
        aside={recipe.customerName === null ? undefined : `for ${recipe.customerName}`}
        sub={shown.content.flavourIntent}
        actions={
          open === undefined ? (
            start
          ) : (
            <LinkButton kind="main" href={`/recipe-versions/${open.id}`}>
              Open version {open.number}, {open.state}
            </LinkButton>
          )
        }
      />
      <VersionTable versions={recipe.versions} zone={zone} />
      <h2 className="mt-7 mb-2 font-[640]">
        Version {shown.number}, {shown.state}
      </h2>
      <ApprovedPicture version={shown} rules={rules} unit={unit} />
    </>
  )
}
