import { acceptInvitation } from '@/lib/accounts/accept-invitation'
import { createCustomer } from '@/lib/accounts/create-customer'
import { inviteAccount } from '@/lib/accounts/invite-account'
import { setPin } from '@/lib/accounts/set-pin'
import type { PersonActor, Role } from '@/lib/auth/actor'
import { systemActor } from '@/lib/auth/actor'
import { readActorOfSession } from '@/lib/auth/read-session-actor'

/** The one password of every demo sign-in: invented, printed at start, of no use anywhere else. */
export const demoPassword = 'oak and embers 27'

const seed = systemActor('set-up')
const device = { userAgent: 'set-up', address: '127.0.0.1' }

export type SeedPerson = { role: Role; name: string; email: string; customer?: number; pin?: string }

/** All invented. */
export const demoPeople = {
  administrator: { role: 'administrator', name: 'P. Quill', email: 'administrator@saltmarsh.example' },
  masterCooper: {
    role: 'master cooper',
    name: 'I. Marr',
    email: 'mastercooper@saltmarsh.example',
    pin: '5092',
  },
  secondMasterCooper: { role: 'master cooper', name: 'S. Vane', email: 'mastercooper2@saltmarsh.example' },
  chemist: { role: 'chemist', name: 'A. Lindqvist', email: 'chemist@saltmarsh.example' },
  toaster: { role: 'toaster', name: 'T. Okafor', email: 'toaster@saltmarsh.example', pin: '4173' },
  secondToaster: { role: 'toaster', name: 'M. Reyes', email: 'toaster2@saltmarsh.example', pin: '2846' },
  customer: { role: 'customer', name: 'R. Harrow', email: 'customer@harrowbay.example', customer: 0 },
  secondCustomer: { role: 'customer', name: 'L. Tarn', email: 'customer@lanternhill.example', customer: 1 },
  thirdCustomer: { role: 'customer', name: 'J. Weir', email: 'customer@causeway.example', customer: 2 },
} as const satisfies Record<string, SeedPerson>

export const demoCustomers = [
  { name: 'Harrow Bay Cellars (demo)', contactEmail: 'customer@harrowbay.example' },
  { name: 'Lantern Hill Wines (demo)', contactEmail: 'customer@lanternhill.example' },
  { name: 'Causeway Estate (demo)', contactEmail: 'customer@causeway.example' },
]

/** The customers' ids, in order. */
export async function seedCustomers(): Promise<string[]> {
  const ids: string[] = []
  for (const customer of demoCustomers) ids.push((await createCustomer(seed, customer)).id)
  return ids
}

/** Invites a person and takes the invitation up for them, as they would by its link. */
export async function seedPerson(person: SeedPerson, customerIds: readonly string[]): Promise<PersonActor> {
  const customerId = person.customer === undefined ? null : (customerIds[person.customer] ?? null)
  const invitation = await inviteAccount(seed, {
    email: person.email,
    name: person.name,
    role: person.role,
    customerId,
  })
  const token = /#token=([\w-]+)/.exec(invitation.link ?? '')?.[1]
  if (token === undefined)
    throw new Error('The seed needs invitations as links: no mail may be sent while it runs.')
  const started = await acceptInvitation({ token, name: undefined, password: demoPassword }, device)
  const actor = await readActorOfSession(started.sessionId)
  if (actor === null) throw new Error(`${person.name} could not be signed in.`)
  if (person.pin !== undefined) await setPin(actor, { password: demoPassword, pin: person.pin })
  return actor
}
