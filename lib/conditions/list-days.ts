import type { EntityManager } from '@mikro-orm/postgresql'
import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { carbonMonoxideStanding, heatStanding } from '@/lib/conditions/exposure-standing'
import type { StandingPoint } from '@/lib/conditions/exposure-standing'
import { missingWords } from '@/lib/conditions/missing-words'
import { readExposurePoints } from '@/lib/conditions/read-exposure-points'
import type { DayLine, listDaysQuery } from '@/lib/conditions/schema'
import { dayBounds, dayOf } from '@/lib/site/site-day'
import { forkEm, queryRows } from '@/lib/db/orm'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'
import { now, nowMs } from '@/lib/runtime'
import type { Site } from '@/lib/site/current-site'
import { currentSite } from '@/lib/site/current-site'

type Row = {
  day: string
  firing_count: number
  room_temp_c: number | null
  yard_temp_c: number | null
  yard_humidity_percent: number | null
}

/** Days of the site on which something was fired or kept, newest first, each with what it lacks. */
export async function listDays(actor: Actor, query: z.infer<typeof listDaysQuery>): Promise<Page<DayLine>> {
  requirePermission(actor, 'conditions:read')
  const em = await forkEm()
  const site = await currentSite(em)
  const before = query.cursor === undefined ? null : String(decodeCursor(query.cursor, 1)[0])
  const rows = await readDays(em, site, before, query.limit + 1)
  const newest = rows[0]?.day
  const oldest = rows.at(-1)?.day
  const points =
    newest === undefined || oldest === undefined
      ? []
      : await readExposurePoints(
          em,
          dayBounds(oldest, site.timeZone).fromAt,
          dayBounds(newest, site.timeZone).untilAt,
        )
  const today = dayOf(now(), site.timeZone)
  const byDay = new Map<string, StandingPoint[]>(rows.map((row) => [row.day, []]))
  for (const point of points) byDay.get(dayOf(new Date(point.atMs), site.timeZone))?.push(point)
  return toPage(
    rows,
    query.limit,
    (row) => toDayLine(row, byDay.get(row.day) ?? [], site, today),
    (row) => [row.day],
  )
}

async function readDays(
  em: EntityManager,
  { timeZone }: Site,
  before: string | null,
  limit: number,
): Promise<Row[]> {
  return queryRows<Row>(
    em,
    `with kept as (
       select (coalesce(toast_at, preheat_at) at time zone ?)::date as day from firings where preheat_at is not null
       union select (at at time zone ?)::date from condition_readings where removed_at is null
       union select (at at time zone ?)::date from exposure_readings where removed_at is null),
     days as (select day, day::timestamp at time zone ? as from_at, (day + 1)::timestamp at time zone ? as until_at
       from kept where ?::date is null or day < ?::date order by day desc limit ?)
     select d.day::text as day,
            (select count(*)::integer from firings
              where preheat_at is not null and coalesce(toast_at, preheat_at) >= d.from_at
                and coalesce(toast_at, preheat_at) < d.until_at) as firing_count,
            r.temp_c as room_temp_c, y.temp_c as yard_temp_c, y.humidity_percent as yard_humidity_percent
       from days d
       left join lateral (select avg(temp_c) as temp_c from condition_readings where removed_at is null
         and place = 'room' and at >= d.from_at and at < d.until_at) r on true
       left join lateral (select avg(temp_c) as temp_c, avg(humidity_percent) as humidity_percent
         from condition_readings where removed_at is null and place = 'yard'
         and at >= d.from_at and at < d.until_at) y on true
      order by d.day desc`,
    [timeZone, timeZone, timeZone, timeZone, timeZone, before, before, limit],
  )
}

function toDayLine(row: Row, points: readonly StandingPoint[], site: Site, today: string): DayLine {
  const { exposure } = site.room
  const untilMs = Math.min(dayBounds(row.day, site.timeZone).untilAt.getTime(), nowMs())
  const carbonMonoxide = carbonMonoxideStanding(points, exposure, untilMs)
  const heat = heatStanding(points, exposure, untilMs)
  const most = (values: readonly number[]) => (values.length === 0 ? null : Math.max(...values))
  return {
    day: row.day,
    firingCount: row.firing_count,
    roomTempC: row.room_temp_c,
    yardTempC: row.yard_temp_c,
    yardHumidityPercent: row.yard_humidity_percent,
    carbonMonoxideCount: carbonMonoxide.reduce((sum, one) => sum + one.readingCount, 0),
    mean8hPpm: most(carbonMonoxide.map((one) => one.mean8hPpm)),
    peakPpm: most(carbonMonoxide.map((one) => one.peakPpm)),
    hottestHourC: most(heat.map((one) => one.hottestHourC)),
    isOver: carbonMonoxide.some((one) => one.over.length > 0) || heat.some((one) => one.over !== 'none'),
    missing: missingWords(
      {
        hasRoomAir: row.room_temp_c !== null,
        hasYardAir: row.yard_temp_c !== null,
        hasCarbonMonoxide: carbonMonoxide.length > 0,
        hasHeat: heat.length > 0,
      },
      row.day === today ? 'today' : 'that day',
    ),
  }
}
