import type { Metadata } from 'next'
import { notFound } from 'next/navigation'
import { AllSpecimens } from '@/components/specimens/all-specimens'
import type { Query } from '@/components/ui/url-query'

export const metadata: Metadata = { title: 'Specimens' }
export const dynamic = 'force-dynamic'

/** Every component in every state, with invented data; development and tests only. */
export default async function SpecimensPage({ searchParams }: { searchParams: Promise<Query> }) {
  if (process.env.NODE_ENV === 'production' && process.env.EMBERSTAVE_MODE !== 'test') notFound()
  return <AllSpecimens query={await searchParams} />
}
