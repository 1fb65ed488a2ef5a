import { forkEm, queryRows } from '@/lib/db/orm'
import { isAppError } from '@/lib/errors'
import type { LateSpan } from '@/lib/ingest/late-rows'
import { lateAfterMs, takeLateSpans } from '@/lib/ingest/late-rows'
import { sealFiring } from '@/lib/ingest/seal-firing'
import { oldestMs } from '@/lib/ingest/sort-readings'
import { notifyFiringChanged } from '@/lib/live/notify'
import { log } from '@/lib/log'
import { now } from '@/lib/runtime'

/** A firing whose gateway has been silent for this long is sealed with what there is. */
export const sealingGraceMs = 120_000
/** And one whose gateway speaks, but of other things, this long after its end. */
export const sealingLatestMs = 30 * 60_000
/** Not sooner: a row that comes after the seal is then one that `noteLateRows` remembers. */
const sealAfterMs = lateAfterMs + 1_000
const everyMs = 3_000
/** A firing that could not be sealed or scored is left alone for this long. */
const retryMs = 30_000

export type SealingOptions = {
  /** Called for each finished firing whose newest seal has no score yet, until it has one. */
  scoreSealed?: (firingId: string) => Promise<void>
  everyMs?: number
}

export type SealingLoop = {
  /** One round now, after the one under way: for tests, seeds and the end of a firing. */
  runOnce: () => Promise<void>
  stop: () => Promise<void>
}

/**
 * Seals ended firings and has them scored, every few seconds. A firing is due once each of its gateways has
 * acknowledged a reading past its end, or has been silent for the grace; one that is sealed is looked at again when readings of its
 * time come late, and once after a start.
 */
export function startSealingLoop(options: SealingOptions = {}): SealingLoop {
  let isStopped = false
  let isFirst = true
  let timer: NodeJS.Timeout | undefined
  let underWay: Promise<void> = Promise.resolve()
  const failedAtMs = new Map<string, number>()
  /** What a person would have to mend first, such as a firing that never toasted; looked at again after a restart. */
  const hopeless = new Set<string>()

  const attempt = async (firingId: string, work: () => Promise<void>) => {
    if (isStopped || now().getTime() - (failedAtMs.get(firingId) ?? -Infinity) < retryMs) return
    try {
      await work()
      failedAtMs.delete(firingId)
    } catch (error) {
      failedAtMs.set(firingId, now().getTime())
      log().error({ err: error, firingId }, 'a firing could not be sealed or scored; trying again in 30 s')
    }
  }
  const seal = async (firingId: string) => {
    const { isNew } = await sealFiring(firingId)
    if (isNew) notifyFiringChanged(firingId, 'sealed')
  }
  const round = async () => {
    const late = isFirst ? await recentlySealed() : await sealedAgain(takeLateSpans())
    isFirst = false
    for (const firingId of new Set([...(await dueFirings()), ...late]))
      await attempt(firingId, () => seal(firingId))
    const { scoreSealed } = options
    if (scoreSealed === undefined) return
    for (const firingId of (await unscored()).filter((id) => !hopeless.has(id))) {
      await attempt(firingId, async () => {
        if (await isScored(scoreSealed, firingId)) notifyFiringChanged(firingId, 'scored')
        else hopeless.add(firingId)
      })
    }
  }
  const run = (): Promise<void> => {
    underWay = underWay.then(round).catch((error: unknown) => {
      log().warn({ err: error }, 'ended firings could not be looked for; trying again')
    })
    return underWay
  }
  const schedule = () => {
    if (isStopped) return
    timer = setTimeout(() => void run().then(schedule), options.everyMs ?? everyMs)
    timer.unref()
  }
  void run().then(schedule)
  return {
    runOnce: run,
    stop: async () => {
      isStopped = true
      clearTimeout(timer)
      await underWay
    },
  }
}

/** False when the verb says that this firing cannot be scored as it is. */
async function isScored(score: (firingId: string) => Promise<void>, firingId: string): Promise<boolean> {
  try {
    await score(firingId)
    return true
  } catch (error) {
    if (!isAppError(error) || error.kind !== 'conflict') throw error
    log().info({ firingId }, `a firing is not scored: ${error.detail}`)
    return false
  }
}

type IdRow = { id: string }

/** Ended, not sealed, and each gateway either past the end, or silent for the grace. */
async function dueFirings(): Promise<string[]> {
  const atMs = now().getTime()
  const rows = await queryRows<IdRow>(
    await forkEm(),
    `with ended as (
       select f.id, f.ended_at, (extract(epoch from f.ended_at) * 1000)::bigint as ended_ms
         from firings f
        where f.state in ('finished', 'abandoned') and f.preheat_at is not null and f.ended_at < ?::timestamptz
          and not exists (select from seals s where s.firing_id = f.id)
          and exists (select from firing_probes fp where fp.firing_id = f.id))
     select e.id from ended e
      where e.ended_at < ?::timestamptz
         or not exists (
           select from firing_probes fp
             join probes p on p.id = fp.probe_id join gateways g on g.id = p.gateway_id
            where fp.firing_id = e.id and greatest(e.ended_at, g.last_seen_at) >= ?::timestamptz
              and not exists (
                select from probes q join readings r on r.probe_no = q.no join gateway_boots b on b.no = r.boot_no
                 where q.gateway_id = g.id and r.at_ms >= e.ended_ms and r.at_ms < e.ended_ms + 600000
                   and r.seq <= b.acked_seq))
      order by e.ended_at limit 50`,
    [new Date(atMs - sealAfterMs), new Date(atMs - sealingLatestMs), new Date(atMs - sealingGraceMs)],
  )
  return rows.map((row) => row.id)
}

/** Sealed firings whose readings may still be in the table: what came late while no process ran is found so. */
async function recentlySealed(): Promise<string[]> {
  const rows = await queryRows<IdRow>(
    await forkEm(),
    `select f.id from firings f
      where f.ended_at > ?::timestamptz and exists (select from seals s where s.firing_id = f.id)`,
    [new Date(now().getTime() - oldestMs)],
  )
  return rows.map((row) => row.id)
}

async function sealedAgain(spans: readonly LateSpan[]): Promise<string[]> {
  if (spans.length === 0) return []
  const em = await forkEm()
  const found: string[] = []
  for (const span of spans) {
    const rows = await queryRows<IdRow>(
      em,
      `select distinct fp.firing_id as id from firing_probes fp join probes p on p.id = fp.probe_id
        where p.no = ? and fp.from_at <= ? and fp.until_at > ?
          and exists (select from seals s where s.firing_id = fp.firing_id)`,
      [span.probeNo, new Date(span.toMs), new Date(span.fromMs)],
    )
    found.push(...rows.map((row) => row.id))
  }
  return found
}

/** Finished firings whose newest seal has no score. */
async function unscored(): Promise<string[]> {
  const rows = await queryRows<IdRow>(
    await forkEm(),
    `select f.id from firings f
      where f.state = 'finished' and exists (select from seals s where s.firing_id = f.id)
        and not exists (select from scores c where c.firing_id = f.id
          and c.seal_revision = (select max(s.revision) from seals s where s.firing_id = f.id))
      order by f.ended_at limit 50`,
  )
  return rows.map((row) => row.id)
}
