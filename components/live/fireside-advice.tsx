import { classNames } from '@/components/ui/class-names'
import type { adviceAnswers } from '@/lib/firings/schema'
import { firesideType } from './fireside-type'

export type AdviceAnswer = (typeof adviceAnswers)[number]

/** One piece of advice that asks something of hands, with two touches that say what came of it. Neither does it. */
export function FiresideAdvice({
  words,
  onAnswer,
}: {
  words: string
  onAnswer: (answer: AdviceAnswer) => void
}) {
  return (
    <div role="group" aria-label="Advice" className="flex items-center gap-3 border-t border-line px-6 py-2">
      <p className={classNames(firesideType.label.className, 'mr-auto min-w-0 font-[560]')}>{words}</p>
      <button
        type="button"
        className="control min-w-[120px] touch-manipulation border-water! text-water"
        onClick={() => onAnswer('taken')}
      >
        Do it
      </button>
      <button
        type="button"
        className="control min-w-[120px] touch-manipulation"
        onClick={() => onAnswer('not now')}
      >
        Not now
      </button>
    </div>
  )
}
