import type { AlarmLevel } from '@/lib/alarms/alarm-kinds'
import { classNames } from '@/components/ui/class-names'
import { firesideType } from './fireside-type'

export type TopLineProps = {
  /** The first is large: "Bilge A has no reading." */
  headline: string
  /** What to do about it. */
  instruction: string
  /** How long it has stood, "0:42". */
  age: string
  /** Grey is a reminder. */
  level: AlarmLevel
  isSeen: boolean
  /** Further alarms behind this one. */
  moreCount?: number
  /** Left out where there is nothing to take note of. */
  onSeen?: () => void
  /** Opens the list of alarms; left out where there is none. */
  onList?: () => void
}

const grounds: Record<AlarmLevel, string> = {
  red: 'bg-alarm-red text-on-alarm',
  amber: 'bg-alarm-amber text-on-alarm',
  grey: 'border-b border-line bg-raised text-text',
}

const target = 'min-h-[85px] shrink-0 touch-manipulation rounded-control border-3 border-current'

/**
 * The line across the top: what is wrong, large; what to do, beneath it. Red says NOW as well. Until somebody has
 * seen it its edge changes once a second; nothing else moves.
 */
export function TopLine(props: TopLineProps) {
  const { headline, instruction, age, level, isSeen, moreCount = 0, onSeen, onList } = props
  return (
    <div
      role="alert"
      className={classNames(
        'flex min-h-[104px] flex-wrap items-center gap-4 px-6 min-[1100px]:flex-nowrap pt-1 pb-[10px]',
        grounds[level],
        isSeen || level === 'grey' ? '' : 'alarm-unseen',
      )}
    >
      <div className="min-w-[min(100%,420px)] flex-1">
        <p
          data-figure={level === 'grey' ? 'reminder' : 'alarm'}
          className={classNames(
            level === 'grey' ? 'text-[40px] leading-none font-[640]' : firesideType.action.className,
            '-tracking-[0.015em]',
          )}
        >
          {headline}
        </p>
        {instruction === '' && level !== 'red' ? null : (
          <p className="mt-1 line-clamp-2 text-[28px] leading-[1.05]">
            {level === 'red' ? (
              <span className="mr-3 border-2 border-current px-2 font-[640]">NOW</span>
            ) : null}
            {instruction}
          </p>
        )}
      </div>
      <span className="shrink-0 self-end pb-2 text-[28px] leading-none">{age}</span>
      {onList === undefined ? null : (
        <button
          type="button"
          onClick={onList}
          aria-haspopup="dialog"
          className={classNames(target, 'max-w-[150px] border-transparent! px-3 text-[24px] leading-[1.1]')}
        >
          <span className="underline underline-offset-4">
            {moreCount === 0 ? 'Shelve' : `and ${moreCount} more`}
          </span>
        </button>
      )}
      {onSeen === undefined ? null : (
        <button
          type="button"
          onClick={onSeen}
          className={classNames(target, 'min-w-[132px] px-6 text-[34px] font-[640]')}
        >
          Seen
        </button>
      )}
    </div>
  )
}
