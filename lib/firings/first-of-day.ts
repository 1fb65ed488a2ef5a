import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import { currentSite } from '@/lib/site/current-site'

/** True when no firing began before on the same day of the site's time zone. */
export async function isFirstOfDay(em: EntityManager, at: Date): Promise<boolean> {
  const { timeZone } = await currentSite(em)
  const earlier = await queryRows(
    em,
    `select 1 from firings where preheat_at < ? and (preheat_at at time zone ?)::date = (?::timestamptz at time zone ?)::date limit 1`,
    [at, timeZone, at, timeZone],
  )
  return earlier.length === 0
}
