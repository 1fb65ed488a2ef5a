import type { PoolClient } from 'pg'
import { databaseErrorCode } from '@/lib/db/database-errors'
import { AppError } from '@/lib/errors'
import type { IngestAnswer, Loss } from '@/lib/gateway/protocol'
import type { Boot } from '@/lib/ingest/boot-rows'
import {
  insertLosses,
  insertReadings,
  insertRefused,
  lockBoot,
  probesOf,
  updateBoot,
} from '@/lib/ingest/boot-rows'
import { ensurePartitions, forgetPartitions, rememberPartitions } from '@/lib/ingest/ensure-partitions'
import { ingestPool } from '@/lib/ingest/ingest-pool'
import { noteLateRows } from '@/lib/ingest/late-rows'
import type { Envelope } from '@/lib/ingest/read-envelope'
import { readEnvelope } from '@/lib/ingest/read-envelope'
import { ackedSeqOf, runsOf, uniteSeqRanges } from '@/lib/ingest/seq-ranges'
import type { SortedReadings } from '@/lib/ingest/sort-readings'
import { sortReadings } from '@/lib/ingest/sort-readings'
import type { GatewayIdentity } from '@/lib/ingest/verify-device-token'
import { hubDoor } from '@/lib/live/hub-door'
import { now } from '@/lib/runtime'

/** A boot's clock offset is taken again only when it has moved by more than this (decision 4). */
const offsetStepMs = 1_000
/** `clock_offset_ms` is a 32-bit integer: 24 days. */
const largestOffsetMs = 2_147_483_647
/** A boot whose numbers lie in more pieces than this is not counting; it would make every message dear. */
const mostRanges = 10_000
/** What PostgreSQL says when no partition fits. */
const noPartition = '23514'

type Stored = { answer: IngestAnswer; sorted: SortedReadings; madeDays: number[] }

/**
 * Stores one message of a gateway and answers how far its boot is acknowledged; returns only after the commit.
 * Readings that cannot be measurements are refused by number and kept with their reason; the others are stored. A
 * repeat changes nothing. The rows that were new go to the live hub.
 *
 * @throws AppError 'invalid' (422) when the message as a whole does not fit
 */
export async function storeReadings(gateway: GatewayIdentity, message: unknown): Promise<IngestAnswer> {
  const envelope = readEnvelope(message)
  const at = now()
  const offsetMs = clockOffsetOf(gateway, envelope, at.getTime())
  const store = () => inIngestTransaction((client) => storeMessage(client, gateway, envelope, offsetMs, at))
  const stored = await store().catch((error: unknown) => {
    // A partition that this process knew was dropped meanwhile: once more, asking for it.
    if (databaseErrorCode(error) !== noPartition) throw error
    forgetPartitions()
    return store()
  })
  rememberPartitions(stored.madeDays)
  if (stored.sorted.seqs.length > 0) {
    noteLateRows(stored.sorted.rows, at.getTime())
    hubDoor().current?.takeRows(stored.sorted.rows)
  }
  return stored.answer
}

/** Server's clock minus gateway's, ms; a gateway that replays speaks of its own past and has none. */
function clockOffsetOf(gateway: GatewayIdentity, envelope: Envelope, atMs: number): number {
  if (gateway.mayReplay) return 0
  const offsetMs = atMs - envelope.sentAtMs
  if (Math.abs(offsetMs) <= largestOffsetMs) return offsetMs
  const sentence = "The gateway's clock is more than 24 days from the server's. Set it, then send again."
  throw new AppError('invalid', sentence, { fields: { sentAt: sentence } })
}

async function inIngestTransaction<T>(work: (client: PoolClient) => Promise<T>): Promise<T> {
  const client = await ingestPool().connect()
  let isBroken = false
  try {
    await client.query('begin')
    const result = await work(client)
    await client.query('commit')
    return result
  } catch (error) {
    await client.query('rollback').catch(() => (isBroken = true))
    throw error
  } finally {
    client.release(isBroken)
  }
}

async function storeMessage(
  client: PoolClient,
  gateway: GatewayIdentity,
  envelope: Envelope,
  offsetMs: number,
  at: Date,
): Promise<Stored> {
  const boot = await lockBoot(client, gateway.gatewayId, envelope.bootId, at)
  const clockOffsetMs = offsetFor(boot, offsetMs)
  const sorted = sortReadings(envelope.readings, {
    received: boot.received,
    probes: await probesOf(client, gateway.gatewayId, envelope.readings),
    clockOffsetMs,
    nowMs: at.getTime(),
    mayReplay: gateway.mayReplay,
  })
  const madeDays = await ensurePartitions(client, sorted.days)
  if (sorted.seqs.length > 0) await insertReadings(client, boot.no, sorted)
  if (sorted.refused.length > 0) await insertRefused(client, boot.no, sorted.refused, at)
  if (envelope.lost.length > 0) await insertLosses(client, boot.no, envelope.lost, at)
  const received = uniteSeqRanges(boot.received, newRanges(sorted, envelope.lost))
  if (received.length > 2 * mostRanges) {
    throw new AppError('invalid', `The numbers of this boot lie in over ${mostRanges} pieces. Send them in order.`)
  }
  const ackedSeq = ackedSeqOf(received)
  await updateBoot(client, gateway.gatewayId, { ...boot, received, ackedSeq, clockOffsetMs }, at)
  return {
    answer: { ackedSeq, refused: sorted.refused.map(({ seq, reason }) => ({ seq, reason })) },
    sorted,
    madeDays,
  }
}

function offsetFor(boot: Boot, offsetMs: number): number {
  const hasMoved = boot.isNew || Math.abs(offsetMs - boot.clockOffsetMs) > offsetStepMs
  return hasMoved ? offsetMs : boot.clockOffsetMs
}

function newRanges(sorted: SortedReadings, lost: readonly Loss[]): (readonly [number, number])[] {
  return [
    ...runsOf(sorted.seqs),
    ...sorted.refused.map(({ seq }) => [seq, seq + 1] as const),
    ...lost.map(({ from, to }) => [from, to + 1] as const),
  ]
}
