import type { PoolClient } from 'pg'
import { databaseErrorCode } from '@/lib/db/database-errors'
import { AppError } from '@/lib/errors'
import type { IngestAnswer, Loss } from '@/lib/gateway/protocol'
import {
  insertLosses,
  insertRefused,
  newestAtMs,
  probesOf,
  readBoot,
  readRows,
  writeReadings,
} from '@/lib/ingest/boot-rows'
import type { ClockOffset, ClockWatch } from '@/lib/ingest/clock-offset'
import { nextClockOffset } from '@/lib/ingest/clock-offset'
import { ensurePartitions, forgetPartitions } from '@/lib/ingest/ensure-partitions'
import type { Boot } from '@/lib/ingest/ingest-pool'
import { ingestPool, rememberedBoots, rememberedClocks } from '@/lib/ingest/ingest-pool'
import { noteLateRows } from '@/lib/ingest/late-rows'
import { noteGatewayStatus } from '@/lib/ingest/note-gateway-status'
import type { Envelope } from '@/lib/ingest/read-envelope'
import { readEnvelope } from '@/lib/ingest/read-envelope'
import { ackedSeqOf, highestSeqOf, printSeqRanges, runsOf, uniteSeqRanges } from '@/lib/ingest/seq-ranges'
import type { SortedReadings } from '@/lib/ingest/sort-readings'
import { sortReadings } from '@/lib/ingest/sort-readings'
import type { GatewayIdentity } from '@/lib/ingest/verify-device-token'
import type { CommittedRows } from '@/lib/live/hub-door'
import { hubDoor } from '@/lib/live/hub-door'
import { now } from '@/lib/runtime'

/** `clock_offset_ms` is a 32-bit integer: 24 days. */
const largestOffsetMs = 2_147_483_647
/** A boot whose numbers lie in more pieces than this is not counting; it would make every message dear. */
const mostRanges = 10_000
/** What PostgreSQL says when no partition fits. */
const noPartition = '23514'
/** Boots that this process remembers; a gateway has one at a time. */
const mostBoots = 500

type Queryable = Pick<PoolClient, 'query'>
type Message = { gateway: GatewayIdentity; envelope: Envelope; offsetMs: number; at: Date }
type Stored = { answer: IngestAnswer; bootNo: number; sorted: SortedReadings; clockOffsetMs: number }

/**
 * Stores one message of a gateway and answers how far its boot is acknowledged; returns only after the commit.
 * Readings that cannot be measurements are refused by number and kept with their reason; the others are stored. A
 * repeat changes nothing. The rows that were new go to the live hub; so do repeats, as they are stored, since whoever
 * committed them may not have lived to tell the hub: a row that it has is no news to it.
 *
 * What was received is remembered in this process and compared again by the statement that writes, so the usual
 * message is one statement. When another sender was faster, the boot's row is locked and read first.
 *
 * @param receivedAt when the message came in, before its token was looked at: the gateway's clock is told by it
 * @throws AppError 'invalid' (422) when the message as a whole does not fit
 */
export async function storeReadings(
  gateway: GatewayIdentity,
  message: unknown,
  receivedAt: Date = now(),
): Promise<IngestAnswer> {
  const at = receivedAt
  const envelope = readEnvelope(message)
  const work: Message = { gateway, envelope, offsetMs: clockOffsetOf(gateway, envelope, at.getTime()), at }
  const stored = await storeWithPartitions(work)
  hubDoor().current?.gatewayHeard(gateway.gatewayId, at.getTime(), stored.clockOffsetMs)
  if (stored.sorted.seqs.length > 0) tellOfRows(stored.sorted.rows, at)
  await tellOfRepeats(stored, envelope, at)
  noteGatewayStatus(gateway.gatewayId, envelope.status, work.offsetMs, at)
  return stored.answer
}

function tellOfRows(rows: CommittedRows, at: Date): void {
  noteLateRows(rows, at.getTime())
  hubDoor().current?.takeRows(rows)
}

/** Repeats are few: what was on its way when a connection or a process went. */
async function tellOfRepeats({ bootNo, sorted }: Stored, { readings }: Envelope, at: Date): Promise<void> {
  if (hubDoor().current === null || readings.length === sorted.seqs.length + sorted.refused.length) return
  const isNew = new Set([...sorted.seqs, ...sorted.refused.map(({ seq }) => seq)])
  const repeats = [...new Set(readings.map(({ seq }) => seq).filter((seq) => !isNew.has(seq)))]
  if (repeats.length > 0) tellOfRows(await readRows(ingestPool(), bootNo, repeats), at)
}

/** Server's clock minus gateway's, ms; a gateway that replays speaks of its own past and has none. */
function clockOffsetOf(gateway: GatewayIdentity, envelope: Envelope, atMs: number): number {
  if (gateway.mayReplay) return 0
  const offsetMs = atMs - envelope.sentAtMs
  if (Math.abs(offsetMs) <= largestOffsetMs) return offsetMs
  const sentence = "The gateway's clock is more than 24 days from the server's. Set it, then send again."
  throw new AppError('invalid', sentence, { fields: { sentAt: sentence } })
}

async function storeWithPartitions(work: Message): Promise<Stored> {
  try {
    return await storeAtOnce(work)
  } catch (error) {
    // A partition that this process knew was dropped meanwhile: once more, asking for it.
    if (databaseErrorCode(error) !== noPartition) throw error
    forgetPartitions()
    return storeAtOnce(work)
  }
}

/** The usual way: by what is remembered of the boot, in one statement. */
async function storeAtOnce(work: Message): Promise<Stored> {
  const pool = ingestPool()
  const boots = rememberedBoots()
  const key = bootKey(work)
  const boot =
    boots.get(key) ?? (await readBoot(pool, work.gateway.gatewayId, work.envelope.bootId, work.at, false))
  const plan = await planChange(pool, work, boot)
  if (plan.sorted.refused.length > 0 || work.envelope.lost.length > 0) return storeLocked(work)
  const isWritten = await writeReadings(pool, plan)
  if (!isWritten) return storeLocked(work)
  remember(key, plan)
  return toStored(plan)
}

/** The careful way: the boot's row locked for a transaction that also keeps refusals and losses. */
async function storeLocked(work: Message): Promise<Stored> {
  const { gateway, envelope, at } = work
  rememberedBoots().delete(bootKey(work))
  const plan = await inIngestTransaction(async (client) => {
    const boot = await readBoot(client, gateway.gatewayId, envelope.bootId, at, true)
    const change = await planChange(client, work, boot)
    const { refused } = change.sorted
    if (refused.length > 0) await insertRefused(client, boot.no, refused, at)
    if (envelope.lost.length > 0) await insertLosses(client, boot.no, envelope.lost, at)
    if (!(await writeReadings(client, change))) throw new Error('the locked row of a boot has changed')
    return change
  })
  remember(bootKey(work), plan)
  return toStored(plan)
}

type Plan = Awaited<ReturnType<typeof planChange>>

async function planChange(client: Queryable, work: Message, boot: Boot) {
  const { gateway, envelope, at } = work
  const { offsetMs: clockOffsetMs, watch } = await offsetFor(client, work, boot)
  const sorted = sortReadings(envelope.readings, {
    received: boot.received,
    probes: await probesOf(client, gateway.gatewayId, envelope.readings, at.getTime()),
    clockOffsetMs,
    nowMs: at.getTime(),
    mayReplay: gateway.mayReplay,
  })
  await ensurePartitions(sorted.days)
  const received = uniteSeqRanges(boot.received, newRanges(sorted, envelope.lost))
  if (received.length > 2 * mostRanges) {
    const sentence = `The numbers of this boot lie in over ${mostRanges} pieces. Send them in order.`
    throw new AppError('invalid', sentence)
  }
  const ackedSeq = ackedSeqOf(received)
  return { boot, gatewayId: gateway.gatewayId, received, ackedSeq, clockOffsetMs, watch, sorted, at }
}

function toStored({ boot, ackedSeq, sorted, clockOffsetMs }: Plan): Stored {
  const refused = sorted.refused.map(({ seq, reason }) => ({ seq, reason }))
  return { answer: { ackedSeq, refused }, bootNo: boot.no, sorted, clockOffsetMs }
}

function bootKey(work: Message): string {
  return `${work.gateway.gatewayId} ${work.envelope.bootId}`
}

function remember(key: string, { boot, received, clockOffsetMs, watch }: Plan): void {
  const boots = rememberedBoots()
  const clocks = rememberedClocks()
  if (watch !== null) clocks.set(key, watch)
  // Set anew, so that the one used longest ago stands first.
  boots.delete(key)
  boots.set(key, { no: boot.no, received, receivedText: printSeqRanges(received), clockOffsetMs })
  const [oldest] = boots.keys()
  if (boots.size <= mostBoots || oldest === undefined) return
  boots.delete(oldest)
  clocks.delete(oldest)
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

/** A gateway that replays has none; see `nextClockOffset`. */
async function offsetFor(client: Queryable, work: Message, boot: Boot): Promise<ClockOffset> {
  if (work.gateway.mayReplay) return { offsetMs: 0, watch: null }
  const settled = highestSeqOf(boot.received)
  return nextClockOffset(
    settled < 0 ? null : boot.clockOffsetMs,
    rememberedClocks().get(bootKey(work)) ?? (await watchFromTable(client, boot)),
    {
      receivedAtMs: work.at.getTime(),
      sentAtMs: work.envelope.sentAtMs,
      doNumbersGoOn: work.envelope.readings.some(({ seq }) => seq > settled),
    },
  )
}

/** After a start: the newest reading was sent no earlier than it was read. */
async function watchFromTable(client: Queryable, boot: Boot): Promise<ClockWatch | null> {
  const atMs = boot.received.length === 0 ? null : await newestAtMs(client, boot.no)
  return atMs === null ? null : { sentAtMs: atMs - boot.clockOffsetMs, doubt: null }
}

function newRanges(sorted: SortedReadings, lost: readonly Loss[]): (readonly [number, number])[] {
  return [
    ...runsOf(sorted.seqs),
    ...sorted.refused.map(({ seq }) => [seq, seq + 1] as const),
    ...lost.map(({ from, to }) => [from, to + 1] as const),
  ]
}
