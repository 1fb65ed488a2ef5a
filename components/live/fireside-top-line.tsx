import { classNames } from '@/components/ui/class-names'
import { firesideType } from './fireside-type'

export type TopLineProps = {
  /** The first is large: "Bilge A has no reading." */
  headline: string
  /** What to do about it. */
  instruction: string
  /** How long it has stood, "0:42". */
  age: string
  level: 'amber' | 'red'
  isSeen: boolean
  /** Left out where there is nothing to take note of. */
  onSeen?: () => void
}

/** An alarm's words as headline and instruction: its first sentence, and the rest. */
export function splitAlarmWords(words: string): { headline: string; instruction: string } {
  const end = words.indexOf('. ')
  if (end < 0) return { headline: words, instruction: '' }
  return { headline: words.slice(0, end + 1), instruction: words.slice(end + 2) }
}

/**
 * The line across the top: what is wrong, large; what to do, beneath it. Red says NOW as well. Until somebody has
 * seen it its edge changes once a second; nothing else moves.
 */
export function TopLine({ headline, instruction, age, level, isSeen, onSeen }: TopLineProps) {
  return (
    <div
      role="alert"
      className={classNames(
        'flex min-h-[104px] items-center gap-4 px-6 pt-1 pb-[10px] text-on-alarm',
        level === 'red' ? 'bg-alarm-red' : 'bg-alarm-amber',
        isSeen ? '' : 'alarm-unseen',
      )}
    >
      <div className="min-w-0 flex-1">
        <p className={classNames(firesideType.action.className, '-tracking-[0.015em]')}>{headline}</p>
        {instruction === '' && level === 'amber' ? null : (
          <p className="mt-1 line-clamp-2 text-[28px] leading-[1.05]">
            {level === 'red' ? (
              <span className="mr-3 border-2 border-current px-2 font-[640]">NOW</span>
            ) : null}
            {instruction}
          </p>
        )}
      </div>
      <span className="shrink-0 self-end pb-2 text-[28px] leading-none">{age}</span>
      {onSeen === undefined ? null : (
        <button
          type="button"
          onClick={onSeen}
          className="min-h-[85px] shrink-0 touch-manipulation rounded-control border-3 border-current px-6 text-[34px] font-[640]"
        >
          Seen
        </button>
      )}
    </div>
  )
}
