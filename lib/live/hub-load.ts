import type { EntityManager } from '@mikro-orm/postgresql'
import { readAlarmStandings } from '@/lib/alarms/read-alarm-standings'
import { forkEm, queryRows } from '@/lib/db/orm'
import { readHot } from '@/lib/ingest/read-hot'
import { events } from '@/lib/live/events'
import type { FiringFacts } from '@/lib/live/firing-facts'
import { readFiringFacts, readLiveStamps } from '@/lib/live/firing-facts'
import { putRow } from '@/lib/live/hub-rows'
import type { Held, HubState } from '@/lib/live/hub-state'
import { inTurn, newlyHeld } from '@/lib/live/hub-state'
import { createLiveFiring } from '@/lib/live/live-firing'
import { log } from '@/lib/log'
import { nowMs } from '@/lib/runtime'

const retryMs = 1_000
/** An ended firing stays for those who look at it, and for its score to be announced. */
const keepEndedMs = 10 * 60_000

/** Reads a firing's readings so far and holds it from then on. */
async function loadFiring(hub: HubState, facts: FiringFacts, stamp: string): Promise<void> {
  const one = newlyHeld(createLiveFiring(facts, { gateways: hub.gateways }), stamp)
  hub.loading.set(facts.firingId, one)
  try {
    // Rows that are committed from here on come through `takeRows`; a row that comes both ways is one point.
    const em = await forkEm()
    await knowGateways(hub, em, facts)
    for (const assignment of facts.assignments) {
      const rows = await readHot(em, assignment.probeNo, [assignment])
      for (let i = 0; i < rows.atMs.length; i += 1) putRow(one.live, assignment, rows, i)
    }
    // Those of a firing that is held already go over, with what was not written down yet.
    await hub.alarmsUnderWay
    one.live.restoreAlarms(await readAlarmStandings(em, facts.firingId))
    one.live.glance(nowMs())
    one.emittedIndex = one.live.stream.lastIndex
    hub.held.set(facts.firingId, one)
  } finally {
    hub.loading.delete(facts.firingId)
  }
}

/** Reads a firing again: into the one that is held, or anew when its probes' periods are others. */
export async function refreshFiring(hub: HubState, firingId: string, stamp: string): Promise<void> {
  const facts = await readFiringFacts(await forkEm(), firingId)
  if (facts === null) return
  const isEnded = facts.state === 'finished' || facts.state === 'abandoned'
  const known = hub.held.get(firingId)
  if (known === undefined && isEnded) return
  if (known === undefined || (!isEnded && periodsOf(known.live.facts()) !== periodsOf(facts))) {
    await loadFiring(hub, facts, stamp)
  } else known.live.setFacts(facts)
  const now = hub.held.get(firingId)
  if (now === undefined) return
  now.stamp = stamp
  now.stateAtMs = -Infinity
  if (isEnded) now.endedAtMs ??= nowMs()
}

/** The gateways of a firing's probes, with when they were heard last, by this process or another. */
async function knowGateways(hub: HubState, em: EntityManager, facts: FiringFacts): Promise<void> {
  const ids = [...new Set(facts.assignments.map((assignment) => assignment.gatewayId))]
  if (ids.length === 0) return
  const rows = await queryRows<{
    id: string
    name: string
    last_seen_at: Date | null
    clock_offset_ms: number | null
  }>(
    em,
    `select id, name, last_seen_at, clock_offset_ms from gateways where id in (${ids.map(() => '?').join(', ')})`,
    ids,
  )
  for (const row of rows) {
    const heardAtMs = row.last_seen_at === null ? null : new Date(row.last_seen_at).getTime()
    hub.gateways.know(row.id, row.name, heardAtMs, row.clock_offset_ms)
  }
}

/** Probes and their periods. */
function periodsOf(facts: FiringFacts): string {
  return JSON.stringify(
    facts.assignments.map((one) => [one.probeId, one.role, one.fromMs, String(one.untilMs)]),
  )
}

async function announce(hub: HubState, firingId: string, whats: readonly string[]): Promise<void> {
  const revision = hub.held.get(firingId)?.live.facts().revision ?? (await readRevision(firingId))
  for (const what of whats) {
    hub.output.toFiring(firingId, events.firingChanged, { firingId, revision, what })
    hub.output.toRoom(events.roomChanged, { firingId, revision, what })
  }
}

async function readRevision(firingId: string): Promise<number> {
  const em = await forkEm()
  const rows = await queryRows<{ revision: number }>(em, 'select revision from firings where id = ?', [
    firingId,
  ])
  return rows[0]?.revision ?? 0
}

/** A verb's word that a firing has changed: read again and announced, as soon as the database answers. */
export function noticeChange(hub: HubState, firingId: string, what: string): void {
  hub.notices.set(firingId, [...(hub.notices.get(firingId) ?? []), what])
  void inTurn(hub, () => workThroughNotices(hub))
}

async function workThroughNotices(hub: HubState): Promise<void> {
  for (const [firingId, whats] of [...hub.notices]) {
    hub.notices.delete(firingId)
    try {
      await refreshFiring(hub, firingId, '')
      await announce(hub, firingId, whats)
    } catch (error) {
      hub.notices.set(firingId, [...whats, ...(hub.notices.get(firingId) ?? [])])
      log().warn({ err: error, firingId }, 'a changed firing could not be read; trying again')
      const again = () => {
        if (!hub.isStopped) void inTurn(hub, () => workThroughNotices(hub))
      }
      setTimeout(again, retryMs).unref()
    }
  }
}

/** Looks for what no verb of this process has told: a start after a stop, another process, a missed notice. */
export async function reconcileWithDatabase(hub: HubState): Promise<void> {
  const stamps = await readLiveStamps(await forkEm())
  for (const { firingId, stamp } of stamps) {
    const known = hub.held.get(firingId)
    if (known?.stamp === stamp) continue
    // After a notice the stamp is empty: that change was announced already.
    const isNews = known === undefined || known.stamp !== ''
    await refreshFiring(hub, firingId, stamp)
    if (isNews) await announce(hub, firingId, [known === undefined ? 'started' : 'details'])
  }
  const em = await forkEm()
  for (const { live } of hub.held.values()) await knowGateways(hub, em, live.facts())
  const liveIds = new Set(stamps.map(({ firingId }) => firingId))
  for (const [firingId, one] of [...hub.held]) await letGo(hub, firingId, one, liveIds.has(firingId))
}

async function letGo(hub: HubState, firingId: string, one: Held, isLive: boolean): Promise<void> {
  if (!isLive && one.endedAtMs === null) {
    await refreshFiring(hub, firingId, '')
    await announce(hub, firingId, [one.live.facts().state === 'abandoned' ? 'abandoned' : 'finished'])
  }
  if (one.endedAtMs !== null && nowMs() - one.endedAtMs > keepEndedMs) hub.held.delete(firingId)
}

/** Reads all live firings, trying again until the database answers. */
export async function loadUntilDone(hub: HubState): Promise<void> {
  while (!hub.isStopped) {
    try {
      await inTurn(hub, () => reconcileWithDatabase(hub))
      return
    } catch (error) {
      log().warn({ err: error }, 'live firings could not be read; trying again in a second')
      await new Promise((resolve) => setTimeout(resolve, retryMs).unref())
    }
  }
}
