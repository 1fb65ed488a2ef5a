import { Suspense } from 'react'
import { PredictionTable } from '@/components/markers/prediction-table'
import type { PersonActor } from '@/lib/auth/actor'
import { isAllowed } from '@/lib/auth/permissions'
import { predictMarkers } from '@/lib/markers/predict-markers'
import { predictMarkersQuery } from '@/lib/markers/schema'

type VersionMarkersProps = {
  actor: PersonActor
  id: string
  /** Lot assays as the address has them. */
  lot: string | string[] | undefined
  isDraft: boolean
}

/** The bench's markers, read apart from it: a stave model or a fit never keeps the bench waiting. */
export function VersionMarkers(props: VersionMarkersProps) {
  if (!isAllowed(props.actor, 'markers:read')) return null
  return (
    <Suspense fallback={<p className="mt-9 text-soft">Predicting the markers.</p>}>
      <ReadMarkers {...props} />
    </Suspense>
  )
}

async function ReadMarkers({ actor, id, lot, isDraft }: VersionMarkersProps) {
  const given = predictMarkersQuery.safeParse(typeof lot === 'string' ? { lot } : {})
  const query = given.success ? given.data : { lot: '' }
  const markers = await predictMarkers(actor, { id, lot: query.lot })
  return <PredictionTable key={query.lot} markers={markers} lot={query.lot} isDraft={isDraft} />
}
