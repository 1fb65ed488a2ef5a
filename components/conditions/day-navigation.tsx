import { LinkButton } from '@/components/ui/link-button'
import { shiftDay } from '@/lib/site/site-day'

/** The day before and after, today, and any day by its date. */
export function DayNavigation({ day, isToday, today }: { day: string; isToday: boolean; today: string }) {
  return (
    <nav aria-label="Day" className="flex flex-wrap items-center gap-2">
      <LinkButton href={`/conditions?day=${shiftDay(day, -1)}`} rel="prev">
        Day before
      </LinkButton>
      {isToday ? null : (
        <>
          <LinkButton href={`/conditions?day=${shiftDay(day, 1)}`} rel="next">
            Day after
          </LinkButton>
          <LinkButton href="/conditions">Today, {today}</LinkButton>
        </>
      )}
      <form action="/conditions" method="get" className="flex items-center gap-2">
        <label htmlFor="conditions-day" className="ml-3 text-soft">
          Day
        </label>
        <input
          id="conditions-day"
          type="date"
          name="day"
          defaultValue={day}
          key={day}
          required
          className="control px-[10px]"
        />
        <button type="submit" className="control px-[13px]">
          Show
        </button>
      </form>
    </nav>
  )
}
