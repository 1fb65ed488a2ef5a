'use client'

import type { ShortStep } from '@/lib/firings/short-steps'
import { FiresideMove } from './fireside-move'
import { FiresideReasons } from './fireside-reasons'
import type { FiresideSheetName } from './fireside-sheets'
import type { OpenReasons } from './use-open-reasons'

/** The sheets of the sequence: why a step was short, once more before the finish, and the move to another hearth. */
export function FiresideStepSheets({
  sheet,
  onSheet,
  firingId,
  reasons,
  nowMs,
  onReason,
  onMoved,
}: {
  sheet: FiresideSheetName | null
  onSheet: (sheet: FiresideSheetName | null) => void
  firingId: string
  reasons: OpenReasons
  nowMs: number
  onReason: (step: ShortStep, words: string) => void
  onMoved: () => void
}) {
  const close = () => onSheet(null)
  if (sheet === 'move') return <FiresideMove firingId={firingId} onMoved={onMoved} onClose={close} />
  if (sheet !== 'why' && sheet !== 'why, then finish') return null
  const isFinish = sheet === 'why, then finish'
  const open = reasons.open(isFinish ? nowMs : null)
  const [step] = open
  if (step === undefined) return null
  const goOn = () => onSheet(isFinish ? 'finish' : null)
  return (
    <FiresideReasons
      // Another step is another sheet: what was typed for one is not said of the next.
      key={`${step.step} ${step.stagePosition ?? ''}`}
      step={step}
      goOnWords={isFinish ? 'Finish without a reason' : 'Not now'}
      onReason={(words) => {
        onReason(step, words)
        if (open.length === 1) goOn()
      }}
      onGoOn={goOn}
      onClose={close}
    />
  )
}
