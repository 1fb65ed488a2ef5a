'use client'

import type { ClipboardEvent, KeyboardEvent } from 'react'
import { Button } from '@/components/ui/button'
import { classNames } from '@/components/ui/class-names'
import { fieldId } from '@/components/ui/field-id'
import { formatDoseFigure, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { Draft, DraftErrors, DraftStage } from './editor-draft'
import { CellError, cellClass, NumberCell } from './number-cell'

export type StageTableProps = {
  draft: Draft
  errors: DraftErrors
  /** Dose of each stage, min at the reference temperature; null while the plan cannot be drawn. */
  doses: readonly number[] | null
  unit: TemperatureUnit
  selectedIndex: number
  onSelect: (index: number) => void
  onChangeStage: (index: number, changes: Partial<DraftStage>) => void
  onAdd: (afterIndex: number) => void
  onRemove: (index: number) => void
  onMove: (index: number, by: -1 | 1) => void
  onPasteRows: (index: number, text: string) => void
  onEndStep: () => void
}

const fields = ['name', 'targetTempC', 'minutes', 'bandC', 'lid', 'cues'] as const
type StageField = (typeof fields)[number]

export function stageField(index: number, field: StageField | 'coalsTargetTempC'): string {
  return `stages.${index}.${field}`
}

function focusCell(index: number, field: StageField): boolean {
  const cell = document.getElementById(fieldId(stageField(index, field)))
  cell?.focus()
  return cell !== null
}

/** The fire's stages, to be typed through: Tab goes on, Enter and the arrows go up and down, Alt with arrows moves a row. */
export function StageTable(props: StageTableProps) {
  const { draft, unit } = props
  return (
    <div>
      <table className="w-full border-collapse">
        <caption className="sr-only">Stages of the fire</caption>
        <thead>
          <tr className="border-b border-line text-small text-soft">
            <HeadCell className="pl-[10px] text-left">Stage</HeadCell>
            <HeadCell className="text-right">To {unitName(unit)}</HeadCell>
            <HeadCell className="text-right">Min</HeadCell>
            <HeadCell className="text-right">± {unitName(unit)}</HeadCell>
            <HeadCell className="text-left">Lid</HeadCell>
            <HeadCell className="text-left">Do</HeadCell>
            <HeadCell className="pr-[10px] text-right">Dose</HeadCell>
          </tr>
        </thead>
        <tbody>
          {draft.stages.map((stage, index) => (
            <StageRow key={stage.key} {...props} stage={stage} index={index} />
          ))}
        </tbody>
      </table>
      <CellError name="stages" error={props.errors['stages']} />
      <SelectedStage {...props} />
    </div>
  )
}

function HeadCell({ children, className }: { children: React.ReactNode; className: string }) {
  return (
    <th scope="col" className={classNames('px-[6px] py-[5px] font-normal whitespace-nowrap', className)}>
      {children}
    </th>
  )
}

type RowProps = StageTableProps & { stage: DraftStage; index: number }

function StageRow(props: RowProps) {
  const { stage, index, errors, doses, unit, selectedIndex, onSelect, onChangeStage, onEndStep } = props
  const isSelected = index === selectedIndex
  const change = (changes: Partial<DraftStage>) => onChangeStage(index, changes)
  const errorOf = (field: StageField) => errors[stageField(index, field)]
  const rowErrors = [...fields, 'kind' as const].flatMap((field) => {
    const error = errors[`stages.${index}.${field}`]
    return error === undefined ? [] : [{ field, error }]
  })
  const common = (field: StageField) => ({
    name: stageField(index, field),
    unit,
    error: errorOf(field),
    onFocus: () => onSelect(index),
    onBlur: onEndStep,
    onKeyDown: (event: KeyboardEvent<HTMLElement>) => walk(event, props, field),
  })
  const text = (field: 'name' | 'cues') => ({
    id: fieldId(stageField(index, field)),
    name: stageField(index, field),
    'aria-invalid': errorOf(field) === undefined ? undefined : (true as const),
    'aria-describedby':
      errorOf(field) === undefined ? undefined : `${fieldId(stageField(index, field))}-error`,
    autoComplete: 'off',
    onFocus: () => onSelect(index),
    onBlur: onEndStep,
    onKeyDown: (event: KeyboardEvent<HTMLElement>) => walk(event, props, field),
    onPaste: (event: ClipboardEvent<HTMLInputElement>) => pasteRows(event, props),
  })
  const rowClass = isSelected ? 'bg-wash shadow-[inset_3px_0_0_var(--water)]' : undefined
  return (
    <>
      <tr className={classNames(rowErrors.length === 0 && 'border-b border-line', rowClass)}>
        <td className="pl-[5px]">
          <input
            {...text('name')}
            aria-label={`Stage ${index + 1}, name`}
            className={classNames(cellClass, 'w-full min-w-[5.5rem]')}
            value={stage.name}
            onChange={(event) => change({ name: event.target.value })}
          />
        </td>
        <td className="text-right">
          <NumberCell
            {...common('targetTempC')}
            label={`${stage.name}, wood to`}
            quantity="temperature"
            className="w-[3.6rem]"
            value={stage.targetTempC}
            onChange={(targetTempC) => change({ targetTempC })}
          />
        </td>
        <td className="text-right">
          <NumberCell
            {...common('minutes')}
            label={`${stage.name}, minutes`}
            className="w-[3.1rem]"
            value={stage.minutes}
            onChange={(minutes) => change({ minutes })}
          />
        </td>
        <td className="text-right">
          <NumberCell
            {...common('bandC')}
            label={`${stage.name}, band`}
            quantity="difference"
            className="w-[3.1rem]"
            value={stage.bandC}
            onChange={(bandC) => change({ bandC })}
          />
        </td>
        <td>
          <button
            type="button"
            id={fieldId(stageField(index, 'lid'))}
            name={stageField(index, 'lid')}
            aria-label={`${stage.name}, lid ${stage.lid}; press to change`}
            className={classNames(cellClass, 'w-[2.4rem] text-left')}
            onClick={() => change({ lid: stage.lid === 'on' ? 'off' : 'on' })}
            onFocus={() => onSelect(index)}
            onBlur={onEndStep}
            onKeyDown={(event) => walk(event, props, 'lid')}
          >
            {stage.lid}
          </button>
        </td>
        <td className="w-full">
          <input
            {...text('cues')}
            aria-label={`${stage.name}, what to do and when`}
            title={stage.cuesText}
            className={classNames(
              cellClass,
              'w-full min-w-[6rem]',
              stage.cuesText.length > 28 && 'text-[12.5px]',
            )}
            value={stage.cuesText}
            onChange={(event) => change({ cuesText: event.target.value })}
          />
        </td>
        <td className="pr-[10px] text-right whitespace-nowrap">
          {doses === null ? '' : formatDoseFigure(doses[index] ?? 0)}
        </td>
      </tr>
      {rowErrors.length === 0 ? null : (
        <tr className={classNames('border-b border-line', rowClass)}>
          <td colSpan={7} className="px-[10px] pb-[6px]">
            {rowErrors.map(({ field, error }) => (
              <CellError key={field} name={`stages.${index}.${field}`} error={error} />
            ))}
          </td>
        </tr>
      )}
    </>
  )
}

/** What has no column: the coals, and what is done to the row as a whole. */
function SelectedStage(props: StageTableProps) {
  const { draft, errors, unit, onChangeStage, onAdd, onRemove, onMove, onEndStep } = props
  const index = Math.min(props.selectedIndex, draft.stages.length - 1)
  const stage = draft.stages[index]
  if (stage === undefined) return <Button onClick={() => onAdd(-1)}>Add a stage</Button>
  const name = stageField(index, 'coalsTargetTempC')
  return (
    <div className="mt-1 pl-[10px] text-small">
      <div className="flex flex-wrap items-center gap-x-4 gap-y-1">
        <span className="text-soft">
          {stage.name}: coals at{' '}
          <NumberCell
            key={stage.key}
            name={name}
            label={`${stage.name}, coals, may stay empty`}
            quantity="temperature"
            decimals={0}
            unit={unit}
            className="w-[4rem] border-line!"
            value={stage.coalsTargetTempC}
            error={errors[name]}
            onChange={(coalsTargetTempC) => onChangeStage(index, { coalsTargetTempC })}
            onBlur={onEndStep}
          />{' '}
          {unitName(unit)} (optional)
        </span>
        <Button kind="quiet" onClick={() => onMove(index, -1)} disabled={index === 0}>
          Move up
        </Button>
        <Button kind="quiet" onClick={() => onMove(index, 1)} disabled={index === draft.stages.length - 1}>
          Move down
        </Button>
        <Button kind="quiet" onClick={() => onRemove(index)} disabled={draft.stages.length === 1}>
          Remove
        </Button>
        <Button kind="quiet" onClick={() => onAdd(index)} disabled={draft.stages.length >= 24}>
          Add a stage after it
        </Button>
      </div>
      <CellError name={name} error={errors[name]} />
      <p className="mt-1 text-mute">
        Do: “feed at 6; lid on at 11”. Alt with an arrow moves a row; rows can be pasted from a spreadsheet.
      </p>
    </div>
  )
}

/** Enter and the arrows walk up and down a column; Alt with an arrow moves the row; Enter past the last adds a stage. */
function walk(event: KeyboardEvent<HTMLElement>, props: RowProps, field: StageField): void {
  const { index, draft, onMove, onAdd } = props
  const by = event.key === 'ArrowUp' || (event.key === 'Enter' && event.shiftKey) ? -1 : 1
  const isMove = event.key === 'ArrowUp' || event.key === 'ArrowDown'
  if (!isMove && (event.key !== 'Enter' || field === 'lid')) return
  if (event.ctrlKey || event.metaKey) return
  event.preventDefault()
  if (isMove && event.altKey) {
    const to = index + by
    if (to < 0 || to >= draft.stages.length) return
    onMove(index, by)
    requestAnimationFrame(() => focusCell(to, field))
    return
  }
  const isPastEnd = index + by >= draft.stages.length
  if (event.key === 'Enter' && isPastEnd && draft.stages.length < 24) {
    onAdd(index)
    requestAnimationFrame(() => focusCell(index + 1, field))
    return
  }
  focusCell(index + by, field)
}

/** Text with tabs or lines comes from a spreadsheet; anything else is pasted as text. */
function pasteRows(event: ClipboardEvent<HTMLInputElement>, props: RowProps): void {
  const text = event.clipboardData.getData('text/plain')
  if (!/\t/.test(text)) return
  event.preventDefault()
  props.onPasteRows(props.index, text)
}
