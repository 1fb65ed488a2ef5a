import type { AlarmFilters } from '@/lib/alarms/schema'
import type { Actor } from '@/lib/auth/actor'
import { isAllowed } from '@/lib/auth/permissions'
import { sqlFilters } from '@/lib/db/sql-filters'

/** The WHERE of a list of comings: the filters, and what the actor may see. A toaster sees their own firings' only. */
export function alarmFilters(
  actor: Actor,
  query: AlarmFilters,
  timeZone: string,
): ReturnType<typeof sqlFilters> {
  const filters = sqlFilters()
  filters.add(`e.from_state = 'normal'`)
  if (query.kind === undefined) filters.add(`e.kind <> 'reminder'`)
  else if (query.kind !== 'all') filters.add('e.kind = ?', query.kind)
  if (query.hearth !== undefined) filters.add('h.number = ?', query.hearth)
  if (query.toasterId !== undefined) filters.add('f.toaster_id = ?', query.toasterId)
  if (query.firingId !== undefined) filters.add('e.firing_id = ?', query.firingId)
  if (query.from !== undefined) filters.add('e.at >= ?::date::timestamp at time zone ?', query.from, timeZone)
  if (query.to !== undefined)
    filters.add('e.at < (?::date + 1)::timestamp at time zone ?', query.to, timeZone)
  if (!isAllowed(actor, 'alarms:read all')) {
    filters.add('f.toaster_id = ?', actor.kind === 'person' ? actor.accountId : null)
  }
  return filters
}
