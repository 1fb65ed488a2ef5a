import type { Metadata } from 'next'
import { EditBench } from '@/components/recipes/edit-bench'
import { ReadBench } from '@/components/recipes/read-bench'
import { VersionActions } from '@/components/recipes/version-actions'
import { VersionSub } from '@/components/recipes/version-sub'
import { PageHead } from '@/components/ui/page-head'
import { requirePageActor } from '@/lib/auth/page-actor'
import { orNotFound } from '@/lib/http/or-not-found'
import { getBench } from '@/lib/recipes/get-bench'

export const metadata: Metadata = { title: 'Recipe version' }

export default async function BenchPage({ params }: { params: Promise<{ id: string }> }) {
  const actor = await requirePageActor()
  const { id } = await params
  const bench = await orNotFound(getBench(actor, { id }), id)
  const { version, basedOn, basedOnPoints, rules, timeZone, openVersion } = bench
  const shadow =
    basedOn === null || basedOnPoints === null
      ? null
      : { name: `version ${basedOn.number}`, points: basedOnPoints }
  const unit = actor.temperatureUnit
  const sub = <VersionSub version={version} basedOn={basedOn} zone={timeZone} />
  if (version.state === 'draft' && bench.canWrite) {
    return <EditBench key={id} version={version} shadow={shadow} rules={rules} unit={unit} sub={sub} />
  }
  const { isAuthor, canWrite, canApprove } = bench
  const rights = { personName: actor.name, isAuthor, canWrite, canApprove, openVersion }
  return (
    <>
      <PageHead
        title={`${version.recipeName}, version ${version.number}`}
        aside={version.state}
        sub={sub}
        actions={<VersionActions version={version} rights={rights} />}
      />
      <ReadBench version={version} shadow={shadow} rules={rules} unit={unit} zone={timeZone} />
    </>
  )
}
