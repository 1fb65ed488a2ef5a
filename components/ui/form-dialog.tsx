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
import { parseDecimal } from '@/lib/format'
import { callApi, problemOf } from '@/lib/http/api-client'
import type { Method } from '@/lib/http/operation'

export type FormField = {
  name: string
  label: string
  /** 'date' is sent as the instant at noon of that day; 'number' takes a decimal comma or point. */
  kind: 'text' | 'number' | 'select' | 'date' | 'checkbox' | 'words' | 'password'
  options?: readonly SelectOption[]
  unit?: string
  hint?: string
  defaultValue?: string | number | boolean | null
  /** Left out of the body when empty, instead of sent as null. */
  isLeftOutWhenEmpty?: boolean
}

export type FormDialogProps = {
  openLabel: string
  openKind?: 'plain' | 'main'
  title: string
  submitLabel: string
  method: Method
  /** With the ids already in it. */
  path: string
  fields: readonly FormField[]
  /** Sent besides the fields. */
  fixed?: Readonly<Record<string, unknown>>
  /** A sentence above the fields: a caution, what this does. */
  children?: React.ReactNode
  /** Where to go when done; `{id}` is the answer's. Left out: this page again. */
  doneHref?: string
}

function bodyOf(
  fields: readonly FormField[],
  values: Readonly<Record<string, string | boolean>>,
): Record<string, unknown> {
  const body: Record<string, unknown> = {}
  for (const field of fields) {
    const value = values[field.name] ?? ''
    if (typeof value === 'boolean') body[field.name] = value
    else if (value.trim() === '' && field.isLeftOutWhenEmpty) continue
    else if (field.kind === 'number')
      body[field.name] = value.trim() === '' ? null : (parseDecimal(value) ?? value)
    else if (field.kind === 'date')
      body[field.name] = value === '' ? null : new Date(`${value}T12:00:00`).toISOString()
    else if (field.kind === 'select') body[field.name] = value === '' ? null : value
    else body[field.name] = value
  }
  return body
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

  async function submit(event: FormEvent) {
    event.preventDefault()
    setIsBusy(true)
    try {
      const answer = await callApi<{ id?: string } | null>(props.method, props.path, {
        body: { ...bodyOf(props.fields, values), ...props.fixed },
      })
      setProblem(null)
      setIsOpen(false)
      setValues(startValues(props.fields))
      if (props.doneHref === undefined) router.refresh()
      else router.push(props.doneHref.replace('{id}', answer?.id ?? ''))
    } catch (error) {
      setProblem(problemOf(error))
    } finally {
      setIsBusy(false)
    }
  }

  const formId = `form-${props.path.replaceAll(/\W+/g, '-')}`
  return (
    <>
      <Button kind={props.openKind ?? 'plain'} onClick={() => setIsOpen(true)}>
        {props.openLabel}
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
        <form id={formId} onSubmit={submit} noValidate className="grid gap-3">
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
              onValue={(value) => setValues((before) => ({ ...before, [field.name]: value }))}
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
  onValue,
}: {
  field: FormField
  value: string | boolean
  error: string | undefined
  onValue: (value: string | boolean) => void
}) {
  const frame = { name: field.name, label: field.label, hint: field.hint, unit: field.unit, error }
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
      inputMode={field.kind === 'number' ? 'decimal' : undefined}
      autoComplete={field.kind === 'password' ? 'current-password' : 'off'}
      value={value}
      onChange={(event) => onValue(event.target.value)}
    />
  )
}
