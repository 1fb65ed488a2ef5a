import { headers } from 'next/headers'
import { redirect } from 'next/navigation'
import { cache } from 'react'
import type { PersonActor } from '@/lib/auth/actor'
import { readSessionActor } from '@/lib/auth/read-session-actor'
import { pagePathHeader, safeNextPath } from '@/lib/http/next-path'

/** The signed-in person of this page request, or null; read once a request. */
export const pageActor = cache(async (): Promise<PersonActor | null> => {
  return readSessionActor((await headers()).get('cookie'))
})

/** The signed-in person, or off to sign in and back here. */
export async function requirePageActor(): Promise<PersonActor> {
  const actor = await pageActor()
  if (actor !== null) return actor
  const from = safeNextPath((await headers()).get(pagePathHeader))
  redirect(from === '/' ? '/sign-in' : `/sign-in?next=${encodeURIComponent(from)}`)
}
