'use client'

import { useRef } from 'react'
import type { FormEvent } from 'react'
import { LeaveWarning } from '@/components/recipes/leave-warning'
import { Button } from '@/components/ui/button'
import { fieldId } from '@/components/ui/field-id'
import { FormError } from '@/components/ui/form-error'
import type { Problem } from '@/components/ui/problem'
import { SelectField } from '@/components/ui/select-field'
import { Table } from '@/components/ui/table'
import { TextArea } from '@/components/ui/text-area'
import type { MarkerDesk } from '@/lib/markers/get-marker-desk'
import type { CheckedFormula, FormulaExample } from '@/lib/markers/schema'
import type { AssayUnit } from '@/lib/science/formula-units'
import { assayUnitNames, isAssayUnit } from '@/lib/science/formula-units'
import { threeDigits } from '@/lib/science/three-digits'
import { FaultLine } from './fault-line'
import { SymbolList } from './symbol-list'

export type FormulaEditorViewProps = Pick<MarkerDesk, 'symbols' | 'functions'> & {
  formula: string
  unit: AssayUnit
  note: string
  /** What the server last said; null before it said anything. */
  checked: CheckedFormula | null
  isChecking: boolean
  isChanged: boolean
  isInForce: boolean
  problem: Problem | null
  isBusy: boolean
  onFormula: (formula: string) => void
  onUnit: (unit: AssayUnit) => void
  onNote: (note: string) => void
  onSave: () => void
}

/** Field, fault under it, what it gives for approved recipes; the names beside. */
export function FormulaEditorView(props: FormulaEditorViewProps) {
  const { formula, unit, note, checked, isChecking, problem, isBusy } = props
  const field = useRef<HTMLDivElement>(null)
  const fault = checked?.ok === false && !isChecking ? checked.fault : null
  const canSave = checked?.ok === true && !isChecking && !props.isInForce

  function take(name: string) {
    const area = field.current?.querySelector('textarea')
    const from = area?.selectionStart ?? formula.length
    const to = area?.selectionEnd ?? from
    props.onFormula(formula.slice(0, from) + name + formula.slice(to))
    area?.focus()
    requestAnimationFrame(() => area?.setSelectionRange(from + name.length, from + name.length))
  }

  function submit(event: FormEvent) {
    event.preventDefault()
    if (canSave) props.onSave()
    else document.getElementById(fieldId('formula'))?.focus()
  }

  return (
    <div className="grid gap-x-9 gap-y-6 lg:grid-cols-[minmax(0,1fr)_minmax(0,1fr)]">
      <form method="post" onSubmit={submit} noValidate className="min-w-0 space-y-4">
        <LeaveWarning isUnsaved={props.isChanged && !isBusy} />
        <FormError problem={problem} labels={{ formula: 'Formula', unit: 'Unit', note: 'Note' }} />
        <div ref={field}>
          <TextArea
            name="formula"
            label="Formula"
            rows={3}
            maxLength={400}
            spellCheck={false}
            autoComplete="off"
            className="[&_textarea]:font-mono"
            value={formula}
            onChange={(event) => props.onFormula(event.target.value.replaceAll('\n', ' '))}
            error={fault === null ? undefined : `Letter ${fault.index + 1}: ${fault.message}`}
            hint="For example 2.4 + 1.8 * log10_dose, or 6 * exp(-stage_minutes(3) / (20 * minute))."
          />
          {fault === null ? null : <FaultLine formula={formula} fault={fault} />}
        </div>
        <p role="status" className="text-soft">
          {statusWords(props)}
        </p>
        <SelectField
          name="unit"
          label="It gives"
          className="w-48"
          value={unit}
          options={assayUnitNames.map((name) => ({ value: name, label: name }))}
          onChange={(event) => {
            if (isAssayUnit(event.target.value)) props.onUnit(event.target.value)
          }}
        />
        <TextArea
          name="note"
          label="Note"
          isOptional
          rows={2}
          maxLength={1000}
          hint="What the figures were taken from; it stays with this response."
          value={note}
          onChange={(event) => props.onNote(event.target.value)}
        />
        <Button type="submit" kind={canSave ? 'due' : 'main'} isBusy={isBusy} disabled={!canSave}>
          Put this formula in force
        </Button>
        {checked?.ok === true ? <Examples examples={checked.examples} unit={checked.unit} /> : null}
      </form>
      <SymbolList symbols={props.symbols} functions={props.functions} onTake={take} />
    </div>
  )
}

function statusWords({ formula, checked, isChecking, isInForce }: FormulaEditorViewProps): string {
  if (formula.trim() === '') return 'Write a formula; it is read as you type.'
  if (isChecking) return 'Reading it.'
  if (checked === null || !checked.ok) return ''
  const plain = `Read as ${checked.formula}`
  if (isInForce) return `${plain}. This is the response in force.`
  return checked.isPureNumber
    ? `${plain}, a number that is taken as ${checked.unit}.`
    : `${plain}, in ${checked.unit}.`
}

function Examples({ examples, unit }: { examples: readonly FormulaExample[]; unit: string }) {
  return (
    <Table
      caption="What it gives for approved recipes"
      isCaptionShown
      rows={examples}
      rowKey={(example) => example.versionId}
      empty={<p className="text-soft">No recipe is approved yet to try it on.</p>}
      columns={[
        {
          key: 'recipe',
          head: 'Approved recipe',
          isRowHead: true,
          cell: (example) => `${example.recipeName}, version ${example.versionNumber}`,
        },
        {
          key: 'value',
          head: 'It gives',
          unit,
          cell: (example) =>
            example.value === null ? (
              <span className="text-amber">{example.reason}</span>
            ) : (
              threeDigits(example.value)
            ),
        },
      ]}
    />
  )
}
