import { ReasonForm } from '@/components/firings/reason-form'
import type { FiringDto } from '@/lib/firings/schema'
import { shortStepsOf, shortStepWords } from '@/lib/firings/short-steps'

/** Steps that were left out or short, each with the reason that was given, beside the score and never inside it. */
export function ShortStepList({ firing, canRun }: { firing: FiringDto; canRun: boolean }) {
  const steps = shortStepsOf(firing)
  if (steps.length === 0) return null
  return (
    <section>
      <h2 className="mb-1">Left out or short</h2>
      <ul className="border-t border-line">
        {steps.map((step) => (
          <li key={`${step.step} ${step.stagePosition ?? ''}`} className="border-b border-line py-[5.5px]">
            {shortStepWords(step)}.{' '}
            {step.reason !== null ? (
              <>
                <span className="text-soft">Why:</span> {step.reason}
              </>
            ) : canRun ? (
              <ReasonForm firingId={firing.id} step={step.step} stagePosition={step.stagePosition} />
            ) : (
              <span className="text-amber">No reason was given.</span>
            )}
          </li>
        ))}
      </ul>
    </section>
  )
}
