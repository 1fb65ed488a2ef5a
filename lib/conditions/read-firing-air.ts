import type { EntityManager } from '@mikro-orm/postgresql'
import type { AirPlace, AirReadingDto } from '@/lib/conditions/schema'
import type { AirRow } from '@/lib/conditions/to-air-reading'
import { toAirReading } from '@/lib/conditions/to-air-reading'
import { queryRows } from '@/lib/db/orm'
import type { Site } from '@/lib/site/current-site'

export type NearestAir = Record<AirPlace, AirReadingDto | null>

/**
 * The air of each firing by the site's rule: of room and yard the reading nearest to its toast start (or its preheat,
 * while there is no toast) that is of the same day of the site and no further than so many hours. An earlier one wins
 * where two are as near.
 */
export async function readFiringAir(
  em: EntityManager,
  site: Pick<Site, 'timeZone' | 'room'>,
  firingIds: readonly string[],
): Promise<Map<string, NearestAir>> {
  const rows = await queryRows<AirRow & { firing_id: string }>(
    em,
    `select f.id as firing_id, n.*
       from firings f
       cross join lateral (select coalesce(f.toast_at, f.preheat_at) as at) t
       cross join (values ('room'), ('yard')) p(place)
       cross join lateral (
         select c.id, c.place, c.at, c.temp_c, c.humidity_percent, a.name as by_name
           from condition_readings c join accounts a on a.id = c.account_id
          where c.place = p.place and c.removed_at is null
            and c.at between t.at - make_interval(secs => ?) and t.at + make_interval(secs => ?)
            and (c.at at time zone ?)::date = (t.at at time zone ?)::date
          order by abs(extract(epoch from c.at - t.at)), c.at limit 1) n
      where f.id in (select value::uuid from jsonb_array_elements_text(?::jsonb))`,
    [
      site.room.conditions.nearestWithinH * 3600,
      site.room.conditions.nearestWithinH * 3600,
      site.timeZone,
      site.timeZone,
      JSON.stringify(firingIds),
    ],
  )
  const found = new Map<string, NearestAir>(firingIds.map((id) => [id, { room: null, yard: null }]))
  for (const { firing_id, ...row } of rows) {
    const air = found.get(firing_id)
    if (air !== undefined) air[row.place] = toAirReading(row)
  }
  return found
}
