import type { EntityManager } from '@mikro-orm/postgresql'
import type { MarkerResponse } from '@/entities/marker-response'
import { MarkerResponseEntity } from '@/entities/marker-response'
import type { PersonActor } from '@/lib/auth/actor'
import { queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { readMarker } from '@/lib/markers/read-markers'
import type { MarkerDetail } from '@/lib/markers/schema'
import { now } from '@/lib/runtime'

/**
 * The marker as it stands, with nobody else writing a response until the transaction ends.
 * @throws AppError 'not found', or 'stale' with the marker when a response was written after the one that was seen
 */
export async function lockMarker(em: EntityManager, id: string, seenNumber: number): Promise<MarkerDetail> {
  await queryRows(em, `select pg_advisory_xact_lock(hashtext('emberstave.markers'), hashtext(?::text))`, [id])
  const marker = await readMarker(em, id)
  const inForce = marker.response?.number ?? 0
  if (inForce === seenNumber) return marker
  throw new AppError(
    'stale',
    `${marker.response?.author ?? 'Somebody'} wrote response ${inForce} after you opened this page. Look at it, then save yours again.`,
    { current: marker },
  )
}

type Columns = Omit<MarkerResponse, 'id' | 'markerId' | 'number' | 'authorId' | 'createdAt'>

/** Appends a response, which is in force from then on. Called with the marker locked. */
export async function writeResponse(
  em: EntityManager,
  person: PersonActor,
  marker: MarkerDetail,
  columns: Columns,
): Promise<number> {
  const number = (marker.response?.number ?? 0) + 1
  em.create(MarkerResponseEntity, {
    ...columns,
    markerId: marker.id,
    number,
    authorId: person.accountId,
    createdAt: now(),
  })
  await em.flush()
  return number
}
