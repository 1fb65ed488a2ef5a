import { headers } from 'next/headers'
import { redirect } from 'next/navigation'
import { cache } from 'react'
import type { PersonActor } from '@/lib/auth/actor'
import { readSessionActor } from '@/lib/auth/read-session-actor'

/** The signed-in person of this page request, or null; read once a request. */
export const pageActor = cache(async (): Promise<PersonActor | null> => {
  return readSessionActor((await headers()).get('cookie'))
})

/** The signed-in person, or off to sign in. */
export async function requirePageActor(): Promise<PersonActor> {
  const actor = await pageActor()
  if (actor === null) redirect('/sign-in')
  return actor
}
