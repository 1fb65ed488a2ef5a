import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import { carbonMonoxideStanding, heatLimits, heatStanding } from '@/lib/conditions/exposure-standing'
import { missingWords } from '@/lib/conditions/missing-words'
import { readExposurePoints } from '@/lib/conditions/read-exposure-points'
import { readFiringAir } from '@/lib/conditions/read-firing-air'
import { readUploads } from '@/lib/conditions/read-uploads'
import type { AirReadingDto, DayDto, DayFiring, ExposureReadingDto } from '@/lib/conditions/schema'
import type { DayBounds } from '@/lib/site/site-day'
import { dayBounds, dayOf } from '@/lib/site/site-day'
import type { AirRow } from '@/lib/conditions/to-air-reading'
import { airSelect, toAirReading } from '@/lib/conditions/to-air-reading'
import type { ExposureRow } from '@/lib/conditions/to-exposure-reading'
import { exposureSelect, toExposureReading } from '@/lib/conditions/to-exposure-reading'
import { forkEm, queryRows } from '@/lib/db/orm'
import { now, nowMs } from '@/lib/runtime'
import type { Site } from '@/lib/site/current-site'
import { currentSite } from '@/lib/site/current-site'

/** Everything that is kept of one day of the site; left out: today. A toaster sees firings that live and their own. */
export async function getDay(actor: Actor, input: { day?: string | undefined }): Promise<DayDto> {
  requirePermission(actor, 'conditions:read')
  const em = await forkEm()
  const site = await currentSite(em)
  const today = dayOf(now(), site.timeZone)
  const day = input.day ?? today
  const bounds = dayBounds(day, site.timeZone)
  const [air, points, byHand, uploads, firings] = await Promise.all([
    readAir(em, bounds),
    readExposurePoints(em, bounds.fromAt, bounds.untilAt),
    readByHand(em, bounds),
    readUploads(em, bounds),
    readDayFirings(em, actor, site, bounds),
  ])
  const { exposure } = site.room
  const untilMs = Math.min(bounds.untilAt.getTime(), nowMs())
  const carbonMonoxide = carbonMonoxideStanding(points, exposure, untilMs)
  const heat = heatStanding(points, exposure, untilMs)
  return {
    day,
    isToday: day === today,
    timeZone: site.timeZone,
    air,
    carbonMonoxide,
    carbonMonoxideLimits: exposure.carbonMonoxideLimits,
    heat,
    heatLimits: heatLimits(exposure),
    byHand,
    uploads,
    firings,
    missing:
      day > today
        ? []
        : missingWords(
            {
              hasRoomAir: air.some((reading) => reading.place === 'room'),
              hasYardAir: air.some((reading) => reading.place === 'yard'),
              hasCarbonMonoxide: carbonMonoxide.length > 0,
              hasHeat: heat.length > 0,
            },
            day === today ? 'today' : 'that day',
          ),
  }
}

async function readAir(em: EntityManager, { fromAt, untilAt }: DayBounds): Promise<AirReadingDto[]> {
  const rows = await queryRows<AirRow>(
    em,
    `${airSelect} where c.removed_at is null and c.at >= ? and c.at < ? order by c.at, c.id`,
    [fromAt, untilAt],
  )
  return rows.map(toAirReading)
}

async function readByHand(em: EntityManager, { fromAt, untilAt }: DayBounds): Promise<ExposureReadingDto[]> {
  const rows = await queryRows<ExposureRow>(
    em,
    `${exposureSelect} where e.removed_at is null and e.upload_id is null and e.at >= ? and e.at < ?
      order by e.at, e.id`,
    [fromAt, untilAt],
  )
  return rows.map(toExposureReading)
}

type FiringRow = {
  id: string
  serial: string
  hearth_number: number | null
  at: Date
  is_first_of_day: boolean
}

async function readDayFirings(
  em: EntityManager,
  actor: Actor,
  site: Site,
  { fromAt, untilAt }: DayBounds,
): Promise<DayFiring[]> {
  const isOwnOnly = actor.kind === 'person' && !isAllowed(actor, 'firings:read all')
  const rows = await queryRows<FiringRow>(
    em,
    `select f.id, p.serial, coalesce(f.toast_at, f.preheat_at) as at, f.is_first_of_day, h.number as hearth_number
       from firings f
       join pieces p on p.id = f.piece_id
       left join lateral (select w.number from firing_placements l join hearths w on w.id = l.hearth_id
         where l.firing_id = f.id order by l.from_at desc limit 1) h on true
      where coalesce(f.toast_at, f.preheat_at) >= ? and coalesce(f.toast_at, f.preheat_at) < ?
        and f.preheat_at is not null
        and (? or f.state not in ('finished', 'abandoned') or f.toaster_id = ?)
      order by 3, f.id`,
    [fromAt, untilAt, !isOwnOnly, actor.kind === 'person' ? actor.accountId : null],
  )
  const air = await readFiringAir(
    em,
    site,
    rows.map((row) => row.id),
  )
  return rows.map((row) => ({
    id: row.id,
    serial: row.serial,
    hearthNumber: row.hearth_number,
    at: new Date(row.at).toISOString(),
    isFirstOfDay: row.is_first_of_day,
    ...(air.get(row.id) ?? { room: null, yard: null }),
  }))
}
