'use client'

import { useRouter } from 'next/navigation'
import type { FormEvent } from 'react'
import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { Checkbox } from '@/components/ui/checkbox'
import { Dialog } from '@/components/ui/dialog'
import { FormError } from '@/components/ui/form-error'
import type { Problem } from '@/components/ui/problem'
import type { SelectOption } from '@/components/ui/select-field'
import { SelectField } from '@/components/ui/select-field'
import { TextArea } from '@/components/ui/text-area'
import { TextField } from '@/components/ui/text-field'
import { fromShownDifference, fromShownTemp, parseDecimal, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { callApi, problemOf } from '@/lib/http/api-client'
import type { Method } from '@/lib/http/operation'
import { shownSentence } from '@/lib/recipes/shown-sentence'

export type FormField = {
  name: string
  label: string
  /**
   * 'date' is sent as the instant at noon of that day; 'number' takes a decimal comma or point; 'temperature' and
   * 'difference' are typed in the person's unit and sent in °C.
   */
  kind:
    'text' | 'number' | 'temperature' | 'difference' | 'select' | 'date' | 'checkbox' | 'words' | 'password'
  options?: readonly SelectOption[]
  unit?: string
  hint?: string
  defaultValue?: string | number | boolean | null
  /** Left out of the body when empty, instead of sent as null. */
  isLeftOutWhenEmpty?: boolean
}

export type FormDialogProps = {
  openLabel: string
  openKind?: 'plain' | 'main' | 'quiet'
  /** Read out after the label, where several rows have the same: "probe Bilge A". */
  openFor?: string
  title: string
  submitLabel: string
  method: Method
  /** For fields that hold a temperature; default °C. */
  personUnit?: TemperatureUnit
  /** With the ids already in it. */
  path: string
  fields: readonly FormField[]
  /** Sent besides the fields. */
  fixed?: Readonly<Record<string, unknown>>
  /** A sentence above the fields: a caution, what this does. */
  children?: React.ReactNode
  /** Where to go when done; `{id}` is the answer's. Left out: this page again. */
  doneHref?: string
  /** Takes the answer: something to show this once. */
  onAnswer?: (answer: unknown) => void
}

function bodyOf(
  fields: readonly FormField[],
  values: Readonly<Record<string, string | boolean>>,
  unit: TemperatureUnit,
): Record<string, unknown> {
  const body: Record<string, unknown> = {}
  for (const field of fields) {
    const value = values[field.name] ?? ''
    if (typeof value === 'boolean') body[field.name] = value
    else if (value.trim() === '' && field.isLeftOutWhenEmpty) continue
    else if (field.kind === 'temperature' || field.kind === 'difference')
      body[field.name] = toSentC(field.kind, value, unit)
    else if (field.kind === 'number')
      body[field.name] = value.trim() === '' ? null : (parseDecimal(value) ?? value)
    else if (field.kind === 'date')
      body[field.name] = value === '' ? null : new Date(`${value}T12:00:00`).toISOString()
    else if (field.kind === 'select') body[field.name] = value === '' ? null : value
    else body[field.name] = value
  }
  return body
}

/** What was typed in the person's unit, in °C; left as it is when it is no number, for the server to name it. */
function toSentC(
  kind: 'temperature' | 'difference',
  typed: string,
  unit: TemperatureUnit,
): number | string | null {
  if (typed.trim() === '') return null
  const value = parseDecimal(typed)
  if (value === null) return typed
  return (kind === 'temperature' ? fromShownTemp : fromShownDifference)(value, unit)
}

/** The server's sentences say °C; a person reads their own unit. */
function shownProblem(problem: Problem, fields: readonly FormField[], unit: TemperatureUnit): Problem {
  if (problem.fields === undefined) return problem
  const kindOf = new Map(fields.map((field) => [field.name, field.kind]))
  const shown = Object.entries(problem.fields).map(([name, sentence]) => [
    name,
    // The path tells a difference, which is converted without the 32.
    shownSentence(kindOf.get(name) === 'difference' ? 'bandC' : name, sentence, unit),
  ])
  return { ...problem, fields: Object.fromEntries(shown) }
}

function startValues(fields: readonly FormField[]): Record<string, string | boolean> {
  return Object.fromEntries(
    fields.map((field) => {
      const value = field.defaultValue ?? (field.kind === 'checkbox' ? false : '')
      return [field.name, typeof value === 'boolean' ? value : String(value)]
    }),
  )
}

/** A button that opens a dialog of fields and sends them as JSON. What was typed stays until it is saved. */
export function FormDialog(props: FormDialogProps) {
  const router = useRouter()
  const [isOpen, setIsOpen] = useState(false)
  const [values, setValues] = useState(() => startValues(props.fields))
  const [problem, setProblem] = useState<Problem | null>(null)
  const [isBusy, setIsBusy] = useState(false)
  const [isTouched, setIsTouched] = useState(false)
  const unit = props.personUnit ?? 'C'

  /** What was typed before stays; otherwise it begins with what holds now. */
  function open() {
    if (!isTouched) setValues(startValues(props.fields))
    setIsOpen(true)
  }

  async function submit(event: FormEvent) {
    event.preventDefault()
    setIsBusy(true)
    try {
      const answer = await callApi<{ id?: string } | null>(props.method, props.path, {
        body: { ...bodyOf(props.fields, values, unit), ...props.fixed },
      })
      setProblem(null)
      setIsOpen(false)
      setIsTouched(false)
      props.onAnswer?.(answer)
      if (props.doneHref === undefined) router.refresh()
      else router.push(props.doneHref.replace('{id}', answer?.id ?? ''))
    } catch (error) {
      setProblem(shownProblem(problemOf(error), props.fields, unit))
    } finally {
      setIsBusy(false)
    }
  }

  const formId = `form-${props.path.replaceAll(/\W+/g, '-')}`
  return (
    <>
      <Button kind={props.openKind ?? 'plain'} onClick={open}>
        {props.openLabel}
        {props.openFor === undefined ? null : <span className="sr-only"> {props.openFor}</span>}
      </Button>
      <Dialog
        isOpen={isOpen}
        onClose={() => setIsOpen(false)}
        title={props.title}
        isBusy={isBusy}
        actions={
          <>
            <Button onClick={() => setIsOpen(false)}>Cancel</Button>
            <Button kind="main" type="submit" form={formId} isBusy={isBusy}>
              {props.submitLabel}
            </Button>
          </>
        }
      >
        <form id={formId} method="post" onSubmit={submit} noValidate className="grid gap-3">
          <FormError
            problem={problem}
            labels={Object.fromEntries(props.fields.map((f) => [f.name, f.label]))}
          />
          {props.children}
          {props.fields.map((field) => (
            <OneField
              key={field.name}
              field={field}
              value={values[field.name] ?? ''}
              error={problem?.fields?.[field.name]}
              unit={unit}
              onValue={(value) => {
                setIsTouched(true)
                setValues((before) => ({ ...before, [field.name]: value }))
              }}
            />
          ))}
        </form>
      </Dialog>
    </>
  )
}

function OneField({
  field,
  value,
  error,
  unit,
  onValue,
}: {
  field: FormField
  value: string | boolean
  error: string | undefined
  unit: TemperatureUnit
  onValue: (value: string | boolean) => void
}) {
  const isTemperature = field.kind === 'temperature' || field.kind === 'difference'
  const shownUnit = isTemperature ? unitName(unit) : field.unit
  const frame = { name: field.name, label: field.label, hint: field.hint, unit: shownUnit, error }
  if (typeof value === 'boolean') {
    return (
      <Checkbox
        name={field.name}
        label={field.label}
        hint={field.hint}
        checked={value}
        onChange={(event) => onValue(event.target.checked)}
      />
    )
  }
  if (field.kind === 'select') {
    return (
      <SelectField
        {...frame}
        options={field.options ?? []}
        placeholder="Choose"
        value={value}
        onChange={(event) => onValue(event.target.value)}
      />
    )
  }
  if (field.kind === 'words') {
    return <TextArea {...frame} value={value} onChange={(event) => onValue(event.target.value)} />
  }
  const type = field.kind === 'date' || field.kind === 'password' ? field.kind : 'text'
  return (
    <TextField
      {...frame}
      type={type}
      inputMode={field.kind === 'number' || isTemperature ? 'decimal' : undefined}
      autoComplete={field.kind === 'password' ? 'current-password' : 'off'}
      value={value}
      onChange={(event) => onValue(event.target.value)}
    />
  )
}
