import type { EntityManager } from '@mikro-orm/postgresql'
import type { AlarmKind } from '@/lib/alarms/alarm-kinds'
import { alarmKinds } from '@/lib/alarms/alarm-kinds'
import type { AlarmDto, AlarmFilters, AlarmRatesDto } from '@/lib/alarms/schema'
import type { AlarmRow } from '@/lib/alarms/to-alarm'
import { alarmSelect, toAlarm } from '@/lib/alarms/to-alarm'
import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { sqlFilters } from '@/lib/db/sql-filters'
import { now } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

/** What is looked at when no days are given. */
export const usualDays = 30
/** Chattering: so many times within this (common practice after ISA-18.2, which counts three in a minute or more). */
const chatterTimes = 3
const chatterWithin = '10 minutes'
const standingAfter = '10 minutes'

type Scope = { fromAt: Date; untilAt: Date; hearth: number | null; toasterId: string | null }

/** How often alarms came, to whom, which, and what stands or is shelved now. Never a ranking: in order of names. */
export async function getAlarmRates(actor: Actor, query: AlarmFilters): Promise<AlarmRatesDto> {
  requirePermission(actor, 'alarms:read')
  const em = await forkEm()
  const scope = await scopeOf(em, actor, query)
  return {
    from: scope.fromAt.toISOString(),
    until: scope.untilAt.toISOString(),
    toasters: await readToasters(em, scope),
    kinds: await readKinds(em, scope),
    chattering: await readChattering(em, scope),
    standing: await readNow(
      em,
      scope,
      `newest.to_state in ('unacknowledged', 'acknowledged')`,
      standingAfter,
    ),
    shelved: await readNow(em, scope, `newest.to_state = 'shelved'`, '0'),
  }
}

async function scopeOf(em: EntityManager, actor: Actor, query: AlarmFilters): Promise<Scope> {
  const { timeZone } = await currentSite(em)
  const at = now()
  const [row] = await queryRows<{ from_at: Date; until_at: Date }>(
    em,
    `select coalesce(?::date::timestamp at time zone ?, ?::timestamptz - make_interval(days => ?)) as from_at,
            least((?::date + 1)::timestamp at time zone ?, ?::timestamptz) as until_at`,
    [query.from ?? null, timeZone, at, usualDays, query.to ?? null, timeZone, at],
  )
  if (row === undefined) throw new Error('the days of the rates could not be made out')
  const isAll = isAllowed(actor, 'alarms:read all')
  const own = actor.kind === 'person' ? actor.accountId : null
  return {
    fromAt: new Date(row.from_at),
    untilAt: new Date(row.until_at),
    hearth: query.hearth ?? null,
    toasterId: isAll ? (query.toasterId ?? null) : own,
  }
}

/** Comings that sounded, in the scope; `e` as in alarmSelect. */
function cameFilters(scope: Scope): ReturnType<typeof sqlFilters> {
  const filters = sqlFilters()
  filters.add(`e.from_state = 'normal' and e.kind <> 'reminder'`)
  filters.add('e.at >= ? and e.at < ?', scope.fromAt, scope.untilAt)
  filters.add(
    `exists (select from alarm_events u where u.occurrence_id = e.occurrence_id and u.to_state = 'unacknowledged')`,
  )
  if (scope.hearth !== null)
    filters.add('e.hearth_id = (select id from hearths where number = ?)', scope.hearth)
  if (scope.toasterId !== null) filters.add('f.toaster_id = ?', scope.toasterId)
  return filters
}

type ToasterRow = { id: string; name: string; alarms: string; hours: number; firings: string }

async function readToasters(em: EntityManager, scope: Scope): Promise<AlarmRatesDto['toasters']> {
  const came = cameFilters(scope)
  const fired = sqlFilters()
  fired.add('f.preheat_at < ? and coalesce(f.ended_at, ?) > ?', scope.untilAt, scope.untilAt, scope.fromAt)
  fired.add('f.toaster_id is not null and not f.is_imported')
  if (scope.toasterId !== null) fired.add('f.toaster_id = ?', scope.toasterId)
  if (scope.hearth !== null) {
    fired.add(
      `exists (select from firing_placements l join hearths h on h.id = l.hearth_id
        where l.firing_id = f.id and h.number = ?)`,
      scope.hearth,
    )
  }
  const rows = await queryRows<ToasterRow>(
    em,
    `with fired as (
       select f.toaster_id, count(*) as firings, range_agg(tstzrange(greatest(f.preheat_at, ?),
                least(coalesce(f.ended_at, ?), ?))) as times
         from firings f ${fired.where()} group by f.toaster_id),
       came as (
         select f.toaster_id, count(*) as alarms from alarm_events e join firings f on f.id = e.firing_id
          ${came.where()} group by f.toaster_id)
     select a.id, a.name, fired.firings, coalesce(came.alarms, 0) as alarms,
            (select coalesce(sum(extract(epoch from upper(r) - lower(r))), 0)::float8 / 3600
               from unnest(fired.times) r) as hours
       from fired join accounts a on a.id = fired.toaster_id left join came on came.toaster_id = a.id
      order by a.name, a.id`,
    [scope.fromAt, scope.untilAt, scope.untilAt, ...fired.parameters, ...came.parameters],
  )
  return rows.map((row) => {
    const alarms = Number(row.alarms)
    return {
      id: row.id,
      name: row.name,
      alarms,
      hours: row.hours,
      perTenMin: row.hours > 0 ? alarms / (6 * row.hours) : null,
      firings: Number(row.firings),
    }
  })
}

type KindRow = { kind: AlarmKind; alarms: string; median_s: number | null; median_seen_s: number | null }

async function readKinds(em: EntityManager, scope: Scope): Promise<AlarmRatesDto['kinds']> {
  const came = cameFilters(scope)
  const rows = await queryRows<KindRow>(
    em,
    `select c.kind, count(*) as alarms,
            percentile_cont(0.5) within group (order by extract(epoch from c.over_at - c.came_at)::float8) as median_s,
            percentile_cont(0.5) within group (order by extract(epoch from c.seen_at - c.came_at)::float8)
              as median_seen_s
       from (${alarmSelect} ${came.where()}) c group by c.kind`,
    came.parameters,
  )
  return rows
    .map((row) => ({
      kind: row.kind,
      alarms: Number(row.alarms),
      medianS: row.median_s,
      medianSeenS: row.median_seen_s,
    }))
    .sort((a, b) => b.alarms - a.alarms || alarmKinds.indexOf(a.kind) - alarmKinds.indexOf(b.kind))
}

type ChatterRow = { firing_id: string; serial: string; kind: AlarmKind; times: string }

async function readChattering(em: EntityManager, scope: Scope): Promise<AlarmRatesDto['chattering']> {
  const came = cameFilters(scope)
  const rows = await queryRows<ChatterRow>(
    em,
    `select firing_id, serial, kind, count(*) as times from (
       select c.*, bool_or(is_fast) over (partition by firing_id, kind, subject) as chatters
         from (select e.firing_id, p.serial, e.kind, e.subject, v.at - lag(v.at, ${chatterTimes - 1}) over
                 (partition by e.firing_id, e.kind, e.subject order by v.id) <= interval '${chatterWithin}' as is_fast
                 from alarm_events e join firings f on f.id = e.firing_id join pieces p on p.id = f.piece_id
                 join alarm_events v on v.occurrence_id = e.occurrence_id and v.to_state = 'unacknowledged'
                  and v.from_state in ('normal', 'returned unacknowledged')
                ${came.where()}) c) d
      where chatters group by firing_id, serial, kind order by times desc, serial limit 20`,
    came.parameters,
  )
  return rows.map((row) => ({
    firingId: row.firing_id,
    serial: row.serial,
    kind: row.kind,
    times: Number(row.times),
  }))
}

/** Of firings that are live, whatever the days. */
async function readNow(em: EntityManager, scope: Scope, state: string, since: string): Promise<AlarmDto[]> {
  const filters = sqlFilters()
  filters.add(`e.from_state = 'normal' and f.ended_at is null and e.kind <> 'reminder' and ${state}`)
  filters.add(`e.at <= ?::timestamptz - interval '${since}'`, now())
  if (scope.hearth !== null) filters.add('h.number = ?', scope.hearth)
  if (scope.toasterId !== null) filters.add('f.toaster_id = ?', scope.toasterId)
  const rows = await queryRows<AlarmRow>(
    em,
    `${alarmSelect} ${filters.where()} order by e.at limit 50`,
    filters.parameters,
  )
  return rows.map(toAlarm)
}
