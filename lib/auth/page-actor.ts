import { headers } from 'next/headers'
import { redirect } from 'next/navigation'
import { cache } from 'react'
import type { DeviceActor, PersonActor } from '@/lib/auth/actor'
import { readDeviceActor } from '@/lib/auth/read-device-actor'
import { readSessionActor } from '@/lib/auth/read-session-actor'
import { pagePathHeader, safeNextPath } from '@/lib/http/next-path'

/** The signed-in person of this page request, or null; read once a request. */
export const pageActor = cache(async (): Promise<PersonActor | null> => {
  return readSessionActor((await headers()).get('cookie'))
})

/** The enrolled device that asks for this page, whoever is signed in at it, or null; read once a request. */
export const pageDevice = cache(async (): Promise<DeviceActor | null> => {
  return readDeviceActor((await headers()).get('cookie'))
})

/** The person signed in by password, or off to sign in and back here. A PIN opens no page but the fireside's. */
export async function requirePageActor(): Promise<PersonActor> {
  const actor = await pageActor()
  if (actor?.byPinAt !== undefined) redirect('/room')
  if (actor !== null) return actor
  return toSignIn()
}

/** Who reads a page of the room: the person, however signed in, or the enrolled device itself. */
export async function requireRoomActor(): Promise<PersonActor | DeviceActor> {
  return (await pageActor()) ?? (await pageDevice()) ?? toSignIn()
}

/** The person at the fireside, by password or PIN; at an enrolled device with nobody there, off to choose a name. */
export async function requireRoomPerson(): Promise<PersonActor> {
  const actor = await pageActor()
  if (actor !== null) return actor
  if ((await pageDevice()) === null) return toSignIn()
  redirect(`/who?next=${encodeURIComponent(safeNextPath((await headers()).get(pagePathHeader)))}`)
}

async function toSignIn(): Promise<never> {
  const from = safeNextPath((await headers()).get(pagePathHeader))
  redirect(from === '/' ? '/sign-in' : `/sign-in?next=${encodeURIComponent(from)}`)
}
