import { classNames } from '@/components/ui/class-names'
import { PressButton } from './fireside-press-button'
import { clockFigures } from './fireside-figures'
import type { MainStep, StepClock } from './fireside-step'
import { firesideType } from './fireside-type'

/** How long, what next, and the one large control. */
export function FiresideStage({
  clock,
  nextWords,
  step,
  isHeldByKey,
  onStep,
}: {
  clock: StepClock | null
  /** "then lid on", "feed now", "Nothing to do". */
  nextWords: string
  /** Null for those who only follow. */
  step: MainStep | null
  isHeldByKey: boolean
  onStep: (step: MainStep) => void
}) {
  return (
    <div className="px-6 pt-2 pb-3">
      <p className={classNames(firesideType.label.className, 'text-soft')}>
        {clock === null ? 'No time runs' : clock.words}
        {clock !== null && clock.seconds >= 6_000 ? ', minutes' : ''}
      </p>
      <p role="timer" data-figure="stage time" className={classNames(firesideType.numeral.className, 'mt-2')}>
        {clock === null ? '–' : clockFigures(clock.seconds)}
      </p>
      <p
        data-figure="next action"
        className={classNames(firesideType.action.className, 'mt-1 line-clamp-2 pb-1 -tracking-[0.01em]')}
      >
        {nextWords}
      </p>
      {step === null ? null : (
        <PressButton
          // Another step is another button: a press that goes on does not run into it.
          key={step.label}
          label={step.label}
          isDue={step.isDue}
          isHeldByKey={isHeldByKey}
          onDone={() => onStep(step)}
          className="mt-2"
        />
      )}
    </div>
  )
}
