import type * as z from 'zod'
import type { gatewayStatusSchema } from '@/lib/gateway/protocol'
import { ingestPool } from '@/lib/ingest/ingest-pool'
import { log } from '@/lib/log'
import { shared } from '@/lib/runtime'

export type GatewayStatus = z.infer<typeof gatewayStatusSchema>

/** What a gateway says of itself is written down at most this often. */
const everyMs = 10_000

function lastNoted(): Map<string, number> {
  return shared('ingest.status', () => new Map<string, number>())
}

/**
 * Keeps what a gateway's program says of itself: apart from the statement that writes readings, after its commit, and
 * waited for by nobody. One that fails is heard in the log; the next comes within seconds.
 *
 * @param offsetMs added to the gateway's own instants
 */
export function noteGatewayStatus(
  gatewayId: string,
  status: GatewayStatus | undefined,
  offsetMs: number,
  at: Date,
): void {
  if (status === undefined) return
  const noted = lastNoted()
  const before = noted.get(gatewayId)
  if (before !== undefined && Math.abs(at.getTime() - before) < everyMs) return
  noted.set(gatewayId, at.getTime())
  writeStatus(gatewayId, status, offsetMs, at).catch((error: unknown) => {
    noted.delete(gatewayId)
    log().warn({ err: error, gatewayId }, 'what a gateway says of itself was not kept; the next will be')
  })
}

async function writeStatus(
  gatewayId: string,
  status: GatewayStatus,
  offsetMs: number,
  at: Date,
): Promise<void> {
  const oldestMs = status.oldestUnsentAt === null ? NaN : Date.parse(status.oldestUnsentAt) + offsetMs
  await ingestPool().query(
    `update gateways set spooled_readings = $2, spooled_bytes = $3, oldest_unsent_at = $4, program_version = $5,
            uptime_s = $6, status_at = $7 where id = $1`,
    [
      gatewayId,
      status.spooledReadings,
      status.spooledBytes,
      Number.isNaN(oldestMs) ? null : new Date(oldestMs),
      status.programVersion.replaceAll('\0', ' '),
      status.uptimeS,
      at,
    ],
  )
}
