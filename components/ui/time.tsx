import { formatInstant } from '@/lib/format'
import type { InstantStyle } from '@/lib/format'

/** An instant in the site's time zone, with the exact one for machines. */
export function Time({
  at,
  zone,
  style = 'dateTime',
}: {
  at: Date | string | number
  zone: string
  style?: InstantStyle
}) {
  return (
    <time dateTime={new Date(at).toISOString()} className="whitespace-nowrap">
      {formatInstant(at, zone, style)}
    </time>
  )
}
