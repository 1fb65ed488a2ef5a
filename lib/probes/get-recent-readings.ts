import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm } from '@/lib/db/orm'
import { readRawReadings } from '@/lib/probes/read-raw-readings'
import type { RecentReadingsDto, recentReadingsQuery } from '@/lib/probes/schema'
import { nowMs } from '@/lib/runtime'

/** What a probe has given in the last seconds, in a firing or not: for a check or a placement to settle by. */
export async function getRecentReadings(
  actor: Actor,
  input: z.infer<typeof recentReadingsQuery> & { id: string },
): Promise<RecentReadingsDto> {
  requirePermission(actor, 'checks:write')
  const atMs = nowMs()
  // A gateway's clock, once corrected, may still stand a little ahead.
  const raw = await readRawReadings(await forkEm(), input.id, atMs - input.seconds * 1000, atMs + 5_000)
  return {
    nowMs: Math.round(atMs),
    atMs: raw.atMs,
    tempC: raw.tempC.map((tempC) => (Number.isNaN(tempC) ? null : Math.round(tempC * 1000) / 1000)),
  }
}
