'use client'

import { useEffect } from 'react'
import { classNames } from '@/components/ui/class-names'
import { firesideType } from './fireside-type'
import { usePress } from './fireside-press'

/** The main action: outlined in water until it is due, filled when it is; pressed for a second. */
export function PressButton({
  label,
  isDue,
  isHeldByKey = false,
  onDone,
  className,
}: {
  label: string
  isDue: boolean
  /** The key of the large control is down. */
  isHeldByKey?: boolean
  onDone: () => void
  className?: string
}) {
  const { progress, isAsked, begin, end, handlers } = usePress(onDone)
  useEffect(() => {
    if (!isHeldByKey) return
    begin()
    return end
  }, [isHeldByKey, begin, end])
  return (
    <button
      type="button"
      aria-describedby="press-hint"
      data-due={isDue || undefined}
      className={classNames(
        'relative flex min-h-[85px] w-full touch-none flex-col items-center justify-center overflow-hidden rounded-control border-3 border-water select-none',
        isDue ? 'bg-water text-on-water' : 'text-water',
        className,
      )}
      {...handlers}
    >
      <span
        aria-hidden="true"
        className={classNames(
          'absolute inset-y-0 left-0',
          isDue ? 'bg-text opacity-60' : 'bg-water opacity-35',
        )}
        style={{ width: `${Math.round(progress * 100)}%` }}
      />
      <span className={classNames('relative', firesideType.mark.className, 'font-[640]!')}>{label}</span>
      <span
        id="press-hint"
        className={classNames('relative', firesideType.small.className, !isDue && 'text-soft')}
      >
        {hintWords(progress, isAsked)}
      </span>
    </button>
  )
}

function hintWords(progress: number, isAsked: boolean): string {
  if (progress > 0) return 'keep pressing'
  return isAsked ? 'press until it is full, or press once more' : 'press for a second'
}
