import { redirect } from 'next/navigation'
import { homeOf } from '@/components/shell/navigation'
import { requirePageActor } from '@/lib/auth/page-actor'

/** Off to where this person's work begins. */
export default async function StartPage() {
  const actor = await requirePageActor()
  redirect(homeOf(actor.role))
}
