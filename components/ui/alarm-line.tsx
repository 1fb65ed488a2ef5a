import type { ReactNode } from 'react'
import { classNames } from './class-names'

/**
 * The line across the top of the fireside: what is wrong and what to do, in words, how long it has stood, and
 * the button that takes note. Unacknowledged, its edge changes once a second; nothing else moves.
 */
export function AlarmLine({
  words,
  ageWords,
  priority,
  isSeen,
  action,
}: {
  words: ReactNode
  ageWords: string
  priority: 'high' | 'medium'
  isSeen: boolean
  /** The acknowledging button. */
  action?: ReactNode
}) {
  return (
    <div
      role="alert"
      className={classNames(
        'flex min-h-[84px] items-center gap-6 px-6 text-[34px] leading-tight text-on-alarm',
        priority === 'high' ? 'bg-alarm-red' : 'bg-alarm-amber',
        isSeen ? '' : 'alarm-unseen',
      )}
    >
      <p className="flex-1 font-[640]">
        {priority === 'high' ? <span className="mr-3 border-2 border-current px-2">NOW</span> : null}
        {words}
      </p>
      <span>{ageWords}</span>
      {action}
    </div>
  )
}
