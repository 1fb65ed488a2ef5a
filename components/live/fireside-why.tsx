import { classNames } from '@/components/ui/class-names'
import type { ShortStep } from '@/lib/firings/short-steps'
import { shortStepWords, usualReasons } from '@/lib/firings/short-steps'
import { firesideType } from './fireside-type'

const button = 'control min-w-[85px] touch-manipulation px-4 text-[21px] whitespace-nowrap'

export type WhyProps = {
  step: ShortStep
  onReason: (words: string) => void
  /** Own words, in a sheet. */
  onOtherWords: () => void
  onLater: () => void
}

/**
 * A step was left out or short: why, in one touch. It asks and stops nothing; the firing has gone on already, and the
 * reason can be given later under More or on the firing's page.
 */
export function FiresideWhy({ step, onReason, onOtherWords, onLater }: WhyProps) {
  return (
    <div
      role="group"
      aria-label={`Why: ${shortStepWords(step)}`}
      className="border-t-3 border-amber bg-raised px-6 py-3"
    >
      <p role="status" className={classNames(firesideType.mark.className, 'mb-3')}>
        {shortStepWords(step)}. <span className="font-normal text-soft">Why?</span>
      </p>
      <div className="flex flex-wrap gap-2">
        {usualReasons[step.step].map((words) => (
          <button key={words} type="button" className={button} onClick={() => onReason(words)}>
            {words}
          </button>
        ))}
        <button type="button" className={classNames(button, 'text-water')} onClick={onOtherWords}>
          Other words
        </button>
        <button type="button" className={classNames(button, 'text-soft')} onClick={onLater}>
          Later
        </button>
      </div>
    </div>
  )
}
