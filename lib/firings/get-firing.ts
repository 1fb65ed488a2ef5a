import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm } from '@/lib/db/orm'
import { requireReadableFiring } from '@/lib/firings/may-read-firing'
import { readFiring } from '@/lib/firings/read-firing'
import type { FiringDto } from '@/lib/firings/schema'

/** One firing with its recipe copy, probes and marks. A device with nobody signed in does not learn whose barrel it is. */
export async function getFiring(actor: Actor, input: { id: string }): Promise<FiringDto> {
  requirePermission(actor, 'firings:follow')
  const firing = await readFiring(await forkEm(), input.id)
  requireReadableFiring(actor, firing)
  return actor.kind === 'device' ? { ...firing, batch: { ...firing.batch, customerName: '' } } : firing
}
