import Link from 'next/link'
import { Time } from '@/components/ui/time'
import type { RecipeVersionDto } from '@/lib/recipes/schema'

/** The line under a version's name: where it comes from, who wrote it, and what became of it. */
export function VersionSub({
  version,
  basedOn,
  zone,
}: {
  version: RecipeVersionDto
  basedOn: RecipeVersionDto | null
  zone: string
}) {
  return (
    <>
      <Link href={`/recipes/${version.recipeId}`} className="link">
        All versions
      </Link>
      . By {version.author.name}
      {basedOn === null ? null : `, from version ${basedOn.number}`}.{' '}
      <LastAct version={version} zone={zone} />
    </>
  )
}

function LastAct({ version, zone }: { version: RecipeVersionDto; zone: string }) {
  if (version.withdrawnAt !== null) {
    return (
      <span className="text-red">
        Withdrawn by {version.withdrawnBy ?? 'a master cooper'} on{' '}
        <Time at={version.withdrawnAt} zone={zone} />: {version.withdrawReason}
      </span>
    )
  }
  if (version.approvedAt !== null) {
    return (
      <>
        Approved by {version.approvedBy} on <Time at={version.approvedAt} zone={zone} style="date" />.
      </>
    )
  }
  if (version.state === 'in review' && version.sentAt !== null) {
    return (
      <>
        Sent for review on <Time at={version.sentAt} zone={zone} />.
      </>
    )
  }
  if (version.returnReason !== null) {
    return (
      <span className="text-amber">
        Returned by {version.returnedBy ?? 'a master cooper'}: {version.returnReason}
      </span>
    )
  }
  return (
    <>
      Last saved <Time at={version.updatedAt} zone={zone} />.
    </>
  )
}
