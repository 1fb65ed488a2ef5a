'use client'

import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'
import { FormError } from '@/components/ui/form-error'
import { PageHead } from '@/components/ui/page-head'
import type { Problem } from '@/components/ui/problem'
import { formatDoseFigure, formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { smallestHonestTolerance } from '@/lib/recipes/honest-tolerance'
import type { RecipeVersionDto } from '@/lib/recipes/schema'
import { planMoisturePercent } from '@/lib/recipes/stave-of'
import type { SiteRules } from '@/lib/science/site-rules'
import { BeforeTheFire, NeverLimits, TargetFields, WordsFields } from './conditions-form'
import type { ConditionsProps } from './conditions-form'
import type { Draft, DraftErrors } from './editor-draft'
import {
  addStage,
  changeDraft,
  changeStage,
  dragPoint,
  drawable,
  moveStage,
  removeStage,
} from './editor-draft'
import { LeaveWarning } from './leave-warning'
import { pasteStages } from './paste-stages'
import type { ShadowPlan } from './plan-pair'
import { PlanPicture } from './plan-picture'
import { StageTable } from './stage-table'
import { usePlan } from './use-plan'

export type EditBenchViewProps = {
  version: RecipeVersionDto
  draft: Draft
  errors: DraftErrors
  problem: Problem | null
  shadow: ShadowPlan | null
  rules: SiteRules
  unit: TemperatureUnit
  sub: React.ReactNode
  isUnsaved: boolean
  isBusy: boolean
  canUndo: boolean
  canRedo: boolean
  /** `mergeKey`: changes of one field in a row are one step of undo. */
  onChange: (make: (draft: Draft) => Draft, mergeKey?: string | null) => void
  onLeaveField: () => void
  onUndo: () => void
  onRedo: () => void
  onSave: () => void
  onSend: () => void
  onDiscard: () => Promise<Problem | null>
}

/** The bench of a draft, drawn: what hands write on the left, the pair on the right. */
export function EditBenchView(props: EditBenchViewProps) {
  const { version, draft, errors, problem, shadow, rules, unit, onChange, onLeaveField } = props
  const [selectedStage, setSelectedStage] = useState(0)
  const view = usePlan(drawable(draft), rules)
  const conditions: ConditionsProps = {
    draft,
    errors,
    unit,
    onChange: (changes, field) => onChange((now) => changeDraft(now, changes), field),
    onEndStep: onLeaveField,
  }
  const plan = view?.plan ?? null
  return (
    <>
      <LeaveWarning isUnsaved={props.isUnsaved} />
      <BenchHead {...props} />
      <FormError problem={problem} />
      <div className="grid gap-x-9 gap-y-6 xl:grid-cols-[minmax(31rem,2fr)_minmax(0,3fr)]">
        <div className="min-w-0 space-y-5">
          <BeforeTheFire {...conditions} />
          <section aria-label="Fire">
            <h2 className="mb-1 font-[640]">Fire</h2>
            <StageTable
              draft={draft}
              errors={errors}
              doses={plan === null || view?.isBehind ? null : plan.stages.map((stage) => stage.doseMin)}
              unit={unit}
              selectedIndex={selectedStage}
              onSelect={setSelectedStage}
              onChangeStage={(index, changes) =>
                onChange(
                  (now) => changeStage(now, index, changes),
                  `stages.${index}.${Object.keys(changes).join()}`,
                )
              }
              onAdd={(after) => {
                onChange((now) => addStage(now, after))
                setSelectedStage(after + 1)
              }}
              onRemove={(index) => {
                onChange((now) => removeStage(now, index))
                setSelectedStage(Math.max(0, index - 1))
              }}
              onMove={(index, by) => {
                onChange((now) => moveStage(now, index, by))
                setSelectedStage(index + by)
              }}
              onPasteRows={(index, text) => onChange((now) => pasteStages(now, index, text, unit))}
              onEndStep={onLeaveField}
            />
          </section>
          <NeverLimits {...conditions} />
          <TargetFields
            {...conditions}
            smallestTolerance={smallestHonestTolerance(rules)}
            isAssumed={rules.errors.isSameMountAssumed}
            planDose={plan === null ? '' : formatDoseFigure(plan.doseMin)}
            doseUnit={`min at ${formatTemp(rules.dose.refTempC, unit)}`}
            toleranceWords={
              plan === null
                ? ''
                : `${formatDoseFigure(plan.targetLowMin)} to ${formatDoseFigure(plan.targetHighMin)}`
            }
          />
          <WordsFields {...conditions} />
        </div>
        {view === null ? null : (
          <PlanPicture
            title={`${version.recipeName}, version ${version.number}`}
            name={`version ${version.number}`}
            plan={view.plan}
            wood={view.wood}
            rules={rules}
            unit={unit}
            depthMm={view.drawn.leadPlace.depthMm}
            moisturePercent={planMoisturePercent(view.drawn)}
            limitC={draft.limits.woodMaximumC}
            shadow={shadow}
            selectedStage={selectedStage}
            onDragPoint={(point) => onChange((now) => dragPoint(now, point), `drag ${point.pointIndex}`)}
            onDragEnd={onLeaveField}
          />
        )}
      </div>
    </>
  )
}

function BenchHead(props: EditBenchViewProps) {
  const { version, isUnsaved, isBusy, canUndo, canRedo } = props
  const [isDiscarding, setIsDiscarding] = useState(false)
  return (
    <>
      <PageHead
        title={`${version.recipeName}, version ${version.number}`}
        aside={version.state}
        sub={
          <>
            {props.sub} <span role="status">{isUnsaved ? 'Not saved.' : 'Saved.'}</span>
          </>
        }
        actions={
          <>
            <Button onClick={props.onUndo} disabled={!canUndo} title="Ctrl Z">
              Undo
            </Button>
            <Button onClick={props.onRedo} disabled={!canRedo} title="Ctrl Shift Z">
              Redo
            </Button>
            <Button onClick={() => setIsDiscarding(true)}>Discard</Button>
            <Button
              kind={isUnsaved ? 'main' : 'plain'}
              onClick={props.onSave}
              isBusy={isBusy}
              disabled={!isUnsaved}
              title="Ctrl S"
            >
              Save
            </Button>
            <Button kind={isUnsaved ? 'main' : 'due'} onClick={props.onSend} isBusy={isBusy}>
              {isUnsaved ? 'Save and send for review' : 'Send for review'}
            </Button>
          </>
        }
      />
      <ConfirmDialog
        isOpen={isDiscarding}
        onClose={() => setIsDiscarding(false)}
        title={`Discard version ${version.number}?`}
        confirmLabel="Discard the draft"
        isDanger
        onConfirm={props.onDiscard}
      >
        The draft is deleted and cannot be brought back.{' '}
        {version.number === 1 ? 'The recipe has no other version and goes with it.' : ''}
      </ConfirmDialog>
    </>
  )
}
