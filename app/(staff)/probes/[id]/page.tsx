import type { Metadata } from 'next'
import { ProbeView } from '@/components/probes/probe-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import { orNotFound } from '@/lib/http/or-not-found'
import type { SearchParams } from '@/lib/http/page-query'
import { readPageQuery } from '@/lib/http/page-query'
import { getProbePage } from '@/lib/probes/get-probe-page'
import { listProbeFiringsQuery } from '@/lib/probes/schema'

export const metadata: Metadata = { title: 'Probe' }

type Props = { params: Promise<{ id: string }>; searchParams: SearchParams }

export default async function ProbePage({ params, searchParams }: Props) {
  const actor = await requirePageActor()
  const { id } = await params
  const { query, raw } = await readPageQuery(listProbeFiringsQuery, searchParams)
  const page = await orNotFound(getProbePage(actor, { ...query, id }), id)
  return <ProbeView page={page} values={raw} unit={actor.temperatureUnit} />
}
