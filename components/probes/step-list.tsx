import { classNames } from '@/components/ui/class-names'

/** Where in a walk one is. */
export function StepList({ steps, current }: { steps: readonly string[]; current: number }) {
  return (
    <ol aria-label="Steps" className="mb-5 flex flex-wrap gap-x-8 gap-y-1 border-b border-line pb-2">
      {steps.map((step, index) => (
        <li
          key={step}
          aria-current={index === current ? 'step' : undefined}
          className={classNames(
            index === current && 'font-[640]',
            index > current && 'text-mute',
            index < current && 'text-soft',
          )}
        >
          {index + 1}. {step}
        </li>
      ))}
    </ol>
  )
}
