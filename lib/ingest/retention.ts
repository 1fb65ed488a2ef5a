import { forkEm, queryRows } from '@/lib/db/orm'
import { dayMs, ensureNextPartitions, forgetPartitions, isoDay } from '@/lib/ingest/ensure-partitions'
import { oldestMs } from '@/lib/ingest/sort-readings'
import { log } from '@/lib/log'
import { nowMs } from '@/lib/runtime'

const everyMs = 3600_000
const retryMs = 60_000

/**
 * Makes the partitions of today and tomorrow and drops those whose last reading is over 48 h old, unless a firing
 * that is not sealed yet needs them. Answers the days that were dropped.
 */
export async function retainReadings(): Promise<string[]> {
  const at = nowMs()
  await ensureNextPartitions(at)
  const em = await forkEm()
  const days = await queryRows<{ day: string }>(
    em,
    `select to_char(list_readings_partitions(), 'YYYY-MM-DD') as day`,
  )
  // A day that has just fallen over the edge waits for the next, so that a late row still finds its table.
  const firstKept = isoDay(Math.floor((at - oldestMs) / dayMs))
  const dropped: string[] = []
  for (const { day } of days) {
    if (day >= firstKept) continue
    const [row] = await queryRows<{ dropped: boolean }>(
      em,
      'select drop_readings_partition(?::date) as dropped',
      [day],
    )
    if (row?.dropped === true) dropped.push(day)
  }
  if (dropped.length > 0) forgetPartitions()
  return dropped
}

/** Runs it now and every hour, and again after a minute when the database does not answer. Answers how to stop. */
export function startRetention(): () => void {
  let timer: NodeJS.Timeout | undefined
  let isStopped = false
  const run = async () => {
    let waitMs = everyMs
    try {
      const dropped = await retainReadings()
      if (dropped.length > 0) log().info({ dropped }, 'readings outside any firing were dropped after 48 h')
    } catch (error) {
      waitMs = retryMs
      log().warn({ err: error }, 'partitions of readings could not be looked after; trying again in a minute')
    }
    if (!isStopped) timer = setTimeout(() => void run(), waitMs)
    timer?.unref()
  }
  void run()
  return () => {
    isStopped = true
    clearTimeout(timer)
  }
}
