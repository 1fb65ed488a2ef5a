import type { Metadata } from 'next'
import { EditBench } from '@/components/recipes/edit-bench'
import { ReadBench } from '@/components/recipes/read-bench'
import { VersionActions } from '@/components/recipes/version-actions'
import { VersionSub } from '@/components/recipes/version-sub'
import { PageHead } from '@/components/ui/page-head'
import { requirePageActor } from '@/lib/auth/page-actor'
import { orNotFound } from '@/lib/http/or-not-found'
import type { SearchParams } from '@/lib/http/page-query'
import { getBench } from '@/lib/recipes/get-bench'
import { VersionMarkers } from './version-markers'

export const metadata: Metadata = { title: 'Recipe version' }

type Props = { params: Promise<{ id: string }>; searchParams: SearchParams }

export default async function BenchPage({ params, searchParams }: Props) {
  const actor = await requirePageActor()
  const { id } = await params
  const bench = await orNotFound(getBench(actor, { id }), id)
  const { version, basedOn, basedOnPoints, rules, timeZone, openVersion } = bench
  const shadow = basedOn && basedOnPoints && { name: `version ${basedOn.number}`, points: basedOnPoints }
  const shown = { version, shadow, rules, unit: actor.temperatureUnit }
  const sub = <VersionSub version={version} basedOn={basedOn} zone={timeZone} />
  const { isAuthor, canWrite, canApprove } = bench
  const rights = { personName: actor.name, isAuthor, canWrite, canApprove, openVersion }
  const isDraft = version.state === 'draft' && canWrite
  const { lot } = await searchParams
  const title = `${version.recipeName}, version ${version.number}`
  const actions = <VersionActions version={version} rights={rights} />
  return (
    <>
      {isDraft ? null : <PageHead title={title} aside={version.state} sub={sub} actions={actions} />}
      {isDraft ? <EditBench key={id} {...shown} sub={sub} /> : <ReadBench {...shown} zone={timeZone} />}
      <VersionMarkers actor={actor} id={id} lot={lot} isDraft={isDraft} />
    </>
  )
}
